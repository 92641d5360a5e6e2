import { randomUUID } from 'node:crypto';
import type { Browser, Locator, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { commission, sentQuote, type Setting } from '../server/deal/deal-setting';
import { DESK, openChromium, openContext } from './chromium';
import { mailOf, signInParts } from './inbox';
import { personOf, settingOf } from './scene';
import { places, servicesOf } from './studio';

const services = servicesOf();
const NAME = 'Idony Thrapstone';
const EMAIL = `idony.${randomUUID().slice(0, 8)}@example.org`;
let browser: Browser;
let setting: Setting;
let page: Page;
/** Stops of the tab key at which the eye could not follow, or which lay under something else. */
const unseen: string[] = [];

beforeAll(async () => {
  browser = await openChromium();
  setting = await settingOf(services, 'Nobody Inparticular');
  page = await (await openContext(browser, { who: 'customer', viewport: DESK })).newPage();
});

afterAll(async () => {
  await browser.close();
  await setting.drop();
});

/**
 * Looks at the element that has the focus: whether something about it or around it looks otherwise than without the
 * focus, and whether it can be seen (WCAG 2.2: 2.4.7 focus visible, 2.4.11 focus not obscured).
 */
function lookAtFocus(): Promise<string | null> {
  return page.evaluate(() => {
    const element = document.activeElement;
    if (!(element instanceof HTMLElement) || element === document.body) return null;
    const name = `${element.tagName.toLowerCase()} ${element.id || element.getAttribute('name') || element.textContent?.trim().slice(0, 40)}`;
    const around: Element[] = [element];
    for (let up = element.parentElement; up && around.length < 5; up = up.parentElement) around.push(up);
    const look = () =>
      around
        .flatMap((each) => [undefined, '::before', '::after'].map((part) => getComputedStyle(each, part)))
        .map((style) => [style.outline, style.boxShadow, style.border, style.backgroundColor, style.clipPath].join())
        .join('\n');
    const withFocus = look();
    const box = element.getBoundingClientRect();
    element.blur();
    const without = look();
    element.focus({ preventScroll: true });
    if (withFocus === without) return `${name}: looks the same with and without the focus`;
    const isTiny = box.width < 3 || box.height < 3;
    const [x, y] = [box.left + box.width / 2, box.top + Math.min(box.height / 2, 20)];
    if (!isTiny && (y < 0 || y > window.innerHeight)) return `${name}: has the focus out of sight`;
    const top = isTiny ? element : document.elementFromPoint(Math.max(1, x), y);
    const isOnTop = top !== null && (element.contains(top) || top.contains(element));
    return isOnTop ? null : `${name}: lies under ${top?.tagName} ${top?.className}`;
  });
}

/** Presses the tab key until `target` has the focus. */
async function tabTo(target: Locator, most = 90): Promise<void> {
  for (let presses = 0; presses < most; presses += 1) {
    if (await target.evaluate((element) => element === document.activeElement)) return;
    await page.keyboard.press('Tab');
    const fault = await lookAtFocus();
    if (fault) unseen.push(`${new URL(page.url()).pathname} ${fault}`);
  }
  throw new Error(`the tab key never came to ${String(target)}`);
}

async function typeInto(label: string, words: string): Promise<void> {
  await tabTo(page.getByLabel(label, { exact: true }));
  await page.keyboard.press('Control+A');
  await page.keyboard.type(words);
}

async function press(name: string | RegExp, key = 'Enter'): Promise<void> {
  await tabTo(page.getByRole('button', { name }).last());
  await page.keyboard.press(key);
}

async function tickEverything(form: string): Promise<void> {
  for (const box of await page.locator(`${form} input[type=checkbox]:visible`).all()) {
    await tabTo(box);
    if (!(await box.isChecked())) await page.keyboard.press('Space');
  }
}

describe('a customer without a mouse', () => {
  it('skips to the page’s content, prices a form and asks for a quote', async () => {
    await page.goto('/price');
    await page.locator('.slider').first().waitFor();
    await page.keyboard.press('Tab');
    expect(await page.evaluate(() => document.activeElement?.getAttribute('href'))).toMatch(/^#/);
    await tabTo(page.getByLabel('Form', { exact: true }));
    await page.keyboard.type('Tanged chisel');
    await page.getByRole('heading', { level: 1, name: /Tanged chisel/ }).waitFor();
    await typeInto('Length', '150');
    await press('Ask for a firm quote');
    await page.waitForURL('**/price/enquire?**');
    await page.getByRole('button', { name: 'Choose files' }).waitFor();
  });

  it('enquires and confirms the address', async () => {
    await typeInto('What have you in mind?', 'A chisel for my own bench, to be used.');
    await tabTo(page.getByLabel('What is it for?'));
    await page.keyboard.press('ArrowDown');
    await typeInto('Name', NAME);
    await typeInto('Mail address', EMAIL);
    await tickEverything('.enquiry');
    await press('Send the enquiry');
    await page.waitForURL('**/price/sent?ref=*');
    const { code } = signInParts(await mailOf(EMAIL, 'M0'));
    await tabTo(page.getByLabel('Six-digit code'));
    await page.keyboard.type(code);
    await press('Confirm the enquiry');
    await page.waitForURL('**/commissions/MF-*');
  });

  it('reads and accepts a quote, and pays', async () => {
    const ref = new URL(page.url()).pathname.split('/').at(-1)!;
    await sentQuote({ ...setting, customer: await personOf(services, EMAIL) }, ref);
    const read = page.getByRole('link', { name: 'Read and accept revision 1' });
    await read.waitFor();
    await tabTo(read);
    await page.keyboard.press('Enter');
    await page.waitForURL('**/quote/1');
    await tickEverything('#accept');
    await typeInto('Your full name', NAME);
    await press('Accept and go to payment');
    await page.waitForURL('**/commissions/*#money');
    await press(/^Pay £/);
    await page.waitForURL(`${places.payUrl}/pay/**`);
    await press(/^Pay £/);
    await page.waitForURL('**/pay/return?**');
    await page.getByRole('heading', { name: 'Your payment is booked' }).waitFor();
    expect((await commission({ services }, ref)).deal).toBe('booked');
  });

  it('never lost sight of where the focus was', () => {
    expect([...new Set(unseen)]).toEqual([]);
  });

  it('is trapped nowhere: the tab key leads through each page and out of it', async () => {
    const guest = await openContext(browser, { who: 'guest', viewport: DESK });
    for (const path of ['/', '/forms', '/price', '/price/enquire?what=form&form=palstave', '/sign-in']) {
      const signedOut = await guest.newPage();
      await signedOut.goto(path);
      await signedOut.waitForLoadState('networkidle');
      const stops = 'a[href], button, input, select, textarea, summary, [tabindex="0"]';
      const left = await signedOut.locator(stops).count();
      let out = false;
      for (let presses = 0; presses < left + 5 && !out; presses += 1) {
        await signedOut.keyboard.press('Tab');
        out = await signedOut.evaluate(() => document.activeElement === document.body || !document.hasFocus());
      }
      expect(out, `the tab key never leaves ${path}`).toBe(true);
      await signedOut.close();
    }
  });
});
