import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';
import { places } from './studio';

const FLAGS = [
  '--headless',
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
];

export const PHONE = { width: 390, height: 844 };
export const DESK = { width: 1440, height: 900 };

/** Debian's Chromium without a window. */
export function openChromium(): Promise<Browser> {
  return chromium.launch({ executablePath: '/usr/bin/chromium', args: FLAGS });
}

/** Gathers whatever pages complain about: console errors and warnings, thrown errors, policy violations, server faults. */
export class Complaints {
  readonly all: string[] = [];

  watch(context: BrowserContext, who: string): void {
    context.on('console', (message) => {
      if (['error', 'warning'].includes(message.type()))
        this.all.push(`${who}, ${message.page()?.url()}: console ${message.type()} ${message.text()}`);
    });
    context.on('weberror', (error) => this.all.push(`${who}, ${error.page()?.url()}: ${error.error().message}`));
    context.on('response', (response) => {
      if (response.status() >= 500) this.all.push(`${who}, ${response.url()}: ${response.status()}`);
    });
  }
}

interface Opening {
  who: string;
  viewport: { width: number; height: number };
  complaints?: Complaints;
  session?: { name: string; value: string };
  scripts?: boolean;
}

/** A browser of somebody's own: nothing in it is shared with another's. */
export async function openContext(browser: Browser, opening: Opening): Promise<BrowserContext> {
  const { who, viewport, complaints, session, scripts = true } = opening;
  const context = await browser.newContext({
    viewport,
    baseURL: places.url,
    javaScriptEnabled: scripts,
    reducedMotion: 'reduce',
  });
  context.setDefaultTimeout(20_000);
  if (session) await context.addCookies([{ ...session, url: places.url }]);
  // A blocked thing is a complaint even where the browser says nothing of it on the console.
  await context.addInitScript(() =>
    document.addEventListener('securitypolicyviolation', (event) =>
      console.error(`policy violated: ${event.violatedDirective} by ${event.blockedURI}`),
    ),
  );
  complaints?.watch(context, who);
  return context;
}

const SHOTS = '.shots';

/** Pictures of a page as it stands, at phone and at desk width, into the ignored folder `.shots`. */
export async function shoot(page: Page, step: string): Promise<void> {
  mkdirSync(SHOTS, { recursive: true });
  const before = page.viewportSize() ?? DESK;
  for (const size of before.width < 600 ? [DESK, PHONE] : [PHONE, DESK]) {
    await page.setViewportSize(size);
    await page.screenshot({ path: join(SHOTS, `${step}-${size.width}.png`), fullPage: true });
  }
  await page.setViewportSize(before);
}
