import { randomUUID } from 'node:crypto';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { openSession } from '../../src/server/auth/session';
import { readPieces } from '../../src/server/making/pieces';
import { commission, sentQuote, type Setting } from '../server/deal/deal-setting';
import { Complaints, DESK, openChromium, openContext, PHONE } from './chromium';
import { mailOf, signInParts } from './inbox';
import { GOOD_CARD } from './pay-page';
import { benchPhoto } from './sample-files';
import { personOf, settingOf } from './scene';
import { places, servicesOf } from './studio';

const services = servicesOf();
const complaints = new Complaints();
const NAME = 'Corwen Ashgrove';
const EMAIL = `corwen.${randomUUID().slice(0, 8)}@example.org`;
let browser: Browser;
let setting: Setting;
let page: Page;
let bench: Page;
let ref: string;

const open = async (who: string, viewport: typeof DESK, session?: { name: string; value: string }) =>
  (await openContext(browser, { who, viewport, complaints, scripts: false, ...(session && { session }) })).newPage();

beforeAll(async () => {
  browser = await openChromium();
  setting = await settingOf(services, 'Nobody Inparticular');
  page = await open('customer', DESK);
  bench = await open('maker', PHONE, await openSession(services, setting.maker.id));
});

let broken = false;
beforeEach((context) => {
  if (broken) context.skip('an earlier step failed');
  context.onTestFailed(() => {
    broken = true;
  });
});

afterAll(async () => {
  await browser.close();
  await setting.drop();
  expect(complaints.all).toEqual([]);
});

describe('with scripts off', () => {
  it('a form is priced by the server, and priced again at another size', async () => {
    await page.goto('/price');
    await page.getByLabel('Form', { exact: true }).selectOption('tanged-chisel');
    await page.getByRole('button', { name: 'Reckon the price' }).first().click();
    await page.getByRole('heading', { level: 1, name: /Tanged chisel/ }).waitFor();
    const first = await page.locator('.price-range').innerText();
    await page.getByLabel('Length', { exact: true }).fill('180');
    await page.getByRole('button', { name: 'Reckon the price' }).first().click();
    await page.waitForURL(/lengthMm=180/);
    expect(await page.locator('.price-range').innerText()).not.toBe(first);
  });

  it('an enquiry that lacks something comes back with everything typed, and is then taken', async () => {
    await page.getByRole('button', { name: 'Ask for a firm quote' }).click();
    await page.waitForURL('**/price/enquire?**');
    await page.getByLabel('What have you in mind?').fill('A chisel for a bench at an open day, to be used in earnest.');
    await page.getByLabel('What is it for?').selectOption('display');
    await page.getByLabel('Name', { exact: true }).fill(NAME);
    await page.getByLabel('Mail address').fill(EMAIL);
    await page.getByLabel('By a day').check();
    await page.getByLabel('You may keep what I send').check();
    await page.getByRole('button', { name: 'Send the enquiry' }).click();
    await page.waitForURL(/again=/);
    await page
      .getByText(/Give the date/)
      .first()
      .waitFor();
    expect(await page.getByLabel('What have you in mind?').inputValue()).toContain('used in earnest');
    expect(await page.getByLabel('Name', { exact: true }).inputValue()).toBe(NAME);
    await page.getByLabel('No date').check();
    await page.getByLabel('You may keep what I send').check();
    await page.getByRole('button', { name: 'Send the enquiry' }).click();
    await page.waitForURL('**/price/sent?ref=*');
  });

  it('its address is confirmed by the code', async () => {
    const { code } = signInParts(await mailOf(EMAIL, 'M0'));
    await page.getByLabel('Six-digit code').fill(code);
    await page.getByRole('button', { name: 'Confirm the enquiry' }).click();
    await page.waitForURL('**/commissions/MF-*');
    ref = new URL(page.url()).pathname.split('/').at(-1)!;
  });

  it('a quote is refused without its declarations, then accepted', async () => {
    await sentQuote({ ...setting, customer: await personOf(services, EMAIL) }, ref);
    await page.reload();
    await page.getByRole('link', { name: 'Read and accept revision 1' }).click();
    await page.getByLabel('Your full name').fill(NAME);
    // The browser itself asks for what is required; a form sent past it is asked by the server.
    await page.locator('#accept form').evaluate((form) => form.setAttribute('novalidate', ''));
    await page.getByRole('button', { name: 'Accept and go to payment' }).click();
    await page.getByText('Tick that you have read the terms.').first().waitFor();
    expect(await page.getByLabel('Your full name').inputValue()).toBe(NAME);
    for (const box of await page.locator('#accept input[type=checkbox]').all()) await box.check();
    await page.getByRole('button', { name: 'Accept and go to payment' }).click();
    await page.waitForURL(`**/commissions/${ref}#money`);
  });

  it('it is paid on the pay page, and the page that it leads back to says so', async () => {
    await page.getByRole('button', { name: /^Pay £/ }).click();
    await page.waitForURL(`${places.payUrl}/pay/**`);
    await page.locator(`input[name=choice][value="${GOOD_CARD}"]`).check();
    await page.getByRole('button', { name: /^Pay £/ }).click();
    await page.waitForURL('**/pay/return?**');
    await mailOf(EMAIL, 'M12');
    await page.reload();
    await page.getByRole('heading', { name: 'Your payment is booked' }).waitFor();
    expect((await commission({ services }, ref)).deal).toBe('booked');
  });

  it('a maker sends a photo and reaches a stage', async () => {
    await bench.goto(`/bench/${ref}`);
    const { id } = await commission({ services }, ref);
    const [before] = await readPieces(services.db, id);
    await bench.locator('#photo-file').setInputFiles(await benchPhoto('plain.jpg', '#b9a27a'));
    await bench.getByLabel('What it shows').fill('Ready for the sand');
    await bench.getByRole('button', { name: 'Send this photo' }).click();
    await bench.getByText('Ready for the sand').first().waitFor();
    await bench.locator('.bench-step button[type=submit]').click();
    await bench.waitForLoadState();
    const [after] = await readPieces(services.db, id);
    expect(after!.stage).toBe(before!.route[0]);
    await page.goto(`/commissions/${ref}`);
    await page.getByText('Ready for the sand').first().waitFor();
  });
});
