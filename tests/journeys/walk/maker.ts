import type { Page } from 'playwright-core';
import type { SampleFile } from '../sample-files';

/** Takes a photo at the bench and sends it with its words. */
export async function sendPhoto(page: Page, photo: SampleFile, caption: string): Promise<void> {
  await page.locator('#photo-file').setInputFiles(photo);
  await page.getByLabel('What it shows').fill(caption);
  await page.getByRole('button', { name: 'Send this photo' }).click();
  await page.locator('.bench-photos').getByText(caption).waitFor();
}

/** Presses the one button that says the next stage is reached, and waits until the bench offers another. */
export async function reach(page: Page, act: string): Promise<void> {
  await page.getByRole('button', { name: act, exact: true }).click();
  await page.getByRole('button', { name: act, exact: true }).waitFor({ state: 'detached' });
}

/** Gives the casting up, with the newest photo as the one that shows it. */
export async function scrap(page: Page, cause: string, note: string): Promise<void> {
  await page.getByText('Something is wrong', { exact: true }).click();
  await page.getByRole('radio', { name: new RegExp(`^${cause}`) }).check();
  await page.getByLabel('Where, and how bad').fill(note);
  await page.locator('.bench-shows').getByRole('radio').first().check();
  await page.getByRole('button', { name: 'Scrap this casting' }).click();
  await page
    .locator('.bench-list')
    .getByText(/scrapped/)
    .waitFor();
}

/** Weighs the piece, notes its balance, and passes it. */
export async function inspect(page: Page, massG: number): Promise<void> {
  await page.getByLabel('Mass, g').fill(String(massG));
  await page.getByLabel('Balance from the grip end, mm').fill('296');
  await reach(page, 'Inspected');
}
