import type { Page } from 'playwright-core';
import { GOOD_CARD } from '../pay-page';
import { bladeStl, sketchPdf } from '../sample-files';

/** Who the walk's collector is. */
export interface Collector {
  name: string;
  email: string;
}

/** Prices the leaf-shaped sword, longer than the studio's own, in TB88. */
export async function priceSword(page: Page): Promise<void> {
  await page.goto('/price');
  await page.getByLabel('Form', { exact: true }).selectOption('leaf-shaped-sword');
  await page.getByRole('heading', { level: 1, name: /Leaf-shaped sword/ }).waitFor();
  await page.getByLabel('Length', { exact: true }).fill('630');
  await page.locator('.price-range').waitFor();
}

/** Goes on to the enquiry, adds a 3D file and a PDF, says what is wanted, and sends it. */
export async function sendEnquiry(page: Page, { name, email }: Collector): Promise<void> {
  await page.locator('input[type=file]').setInputFiles([bladeStl(), sketchPdf()]);
  await page.getByRole('listitem').filter({ hasText: 'leaf blade.stl' }).waitFor();
  await page.getByRole('button', { name: 'Remove grip sketch.pdf' }).waitFor();
  await page
    .getByLabel('What have you in mind?')
    .fill('A sword after a river find, balanced for the hand, with the flanged grip of the drawing.');
  await page.getByLabel('What is it for?').selectOption('display');
  await page.getByLabel('Name', { exact: true }).fill(name);
  await page.getByLabel('Mail address').fill(email);
  await page.getByLabel('I am 18 or over').check();
  await page.getByLabel('You may keep what I send to answer this enquiry').check();
}

/** Accepts the quote whose page is open: every declaration ticked, the name typed. */
export async function acceptQuote(page: Page, { name }: Collector): Promise<void> {
  for (const box of await page.locator('#accept input[type=checkbox]').all()) await box.check();
  await page.getByLabel('Your full name').fill(name);
  await page.getByRole('button', { name: 'Accept and go to payment' }).click();
  await page.waitForURL('**/commissions/*#money');
}

/** Presses the commission page's pay button and pays with a card that the bank accepts. */
export async function payDue(page: Page, ref: string): Promise<void> {
  await page.goto(`/commissions/${ref}`);
  await page.getByRole('button', { name: /^Pay £/ }).click();
  await page.waitForURL('**/pay/cs_test_*');
  await page.locator(`input[name=choice][value="${GOOD_CARD}"]`).check();
  await page.getByRole('button', { name: /^Pay £/ }).click();
  await page.waitForURL('**/pay/return?**');
  await page.getByRole('heading', { name: 'Your payment is booked' }).waitFor();
}

/** Tries to accept a revision that was withdrawn while its page stood open; the page says so. */
export async function acceptRefused(page: Page, { name }: Collector): Promise<void> {
  for (const box of await page.locator('#accept input[type=checkbox]').all()) await box.check();
  await page.getByLabel('Your full name').fill(name);
  await page.getByRole('button', { name: 'Accept and go to payment' }).click();
  await page.getByText(/Revision 1 was withdrawn/).waitFor();
}

/** Says where the parcel goes. */
export async function giveAddress(page: Page, ref: string): Promise<void> {
  await page.goto(`/commissions/${ref}`);
  await page.getByText('Give the address', { exact: true }).click();
  await page.getByLabel('Name, street, place, postcode').fill('Sabine Ferrowick\n3 Withy Lane\nOverlenn\nLE1 2NN');
  await page.getByLabel('Telephone, for the carrier').fill('+44 1632 960199');
  await page.getByRole('button', { name: 'Keep this address' }).click();
  await page.getByText('Change the address', { exact: true }).waitFor();
}
