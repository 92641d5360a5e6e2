import type { Page } from 'playwright-core';
import { mailOf, signInParts } from '../inbox';

/** Signs in at the sign-in page with the code from the mail, as on a device that the mail did not reach. */
export async function signInByCode(page: Page, email: string): Promise<void> {
  await page.goto('/sign-in');
  await page.getByLabel('Mail address').fill(email);
  await page.getByRole('button', { name: 'Mail me a link and a code' }).click();
  await page.waitForURL('**/sign-in/code');
  const { code } = signInParts(await mailOf(email, 'M0'));
  await page.getByLabel('Six-digit code').fill(code);
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
}

/** Signs in by the link from the mail: the page it opens changes nothing, its button does. */
export async function signInByLink(page: Page, link: string): Promise<void> {
  await page.goto(link);
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
}
