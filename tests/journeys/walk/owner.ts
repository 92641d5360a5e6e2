import type { Page } from 'playwright-core';

/** Asks the customer exactly one question; those suggested are emptied. */
export async function askOne(page: Page, ref: string, question: { text: string; why: string }): Promise<void> {
  await page.goto(`/studio/commissions/${ref}`);
  await page.getByText('Ask the customer', { exact: true }).click();
  for (let place = 0; place < 5; place += 1) {
    await page.locator(`[name="questions.${place}.text"]`).fill(place === 0 ? question.text : '');
    await page.locator(`[name="questions.${place}.why"]`).fill(place === 0 ? question.why : '');
  }
  await page.getByRole('button', { name: 'Send the questions' }).click();
  await page.locator('#questions').getByText(question.text).waitFor();
}

/** Opens the quote desk, changes the hours of one line, and comes as far as the last look before sending. */
export async function workOnQuote(page: Page, ref: string, line: { label: string; hours: string }): Promise<void> {
  await page.goto(`/studio/commissions/${ref}/quote`);
  const hours = page.getByLabel(`Hours, ${line.label}`, { exact: true });
  await hours.fill(line.hours);
  await page.getByLabel('Why it differs from the range').fill('You asked for it longer, and the grip takes more work.');
  await page.getByRole('button', { name: /^Send revision \d+$/ }).click();
  await page.locator('#send').waitFor();
}

/** Sends the revision that was looked over. */
export async function sendRevision(page: Page, revision: number): Promise<void> {
  await page.getByLabel('I have read what will be frozen').check();
  await page.getByRole('button', { name: `Send revision ${revision} now` }).click();
  await page.waitForURL('**/studio/commissions/*#quotes');
  await page.getByText(`Revision ${revision}`, { exact: true }).waitFor();
}

/** Hands the parcel to the carrier. */
export async function dispatch(page: Page, ref: string): Promise<void> {
  await page.goto(`/studio/commissions/${ref}`);
  await page.getByLabel('Carrier').fill('Estuary Parcels');
  await page.getByLabel('Tracking number').fill('EP 1632 960 188');
  await page.getByLabel('An adult must sign for it').check();
  await page.getByRole('button', { name: 'It is with the carrier' }).click();
  await page.getByRole('heading', { name: 'On its way' }).waitFor();
}
