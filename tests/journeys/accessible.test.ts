import { AxeBuilder } from '@axe-core/playwright';
import type { Browser, BrowserContext } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openSession } from '../../src/server/auth/session';
import { Complaints, openChromium, openContext } from './chromium';
import { routeFiles } from './routes/route-files';
import { RULES, type Rule } from './routes/rules.table';
import { fillIn, isAboutSomething, NOWHERE, placesOf, type Named } from './routes/targets';
import { personOf } from './scene';
import { servicesOf } from './studio';

// WCAG 2.2, levels A and AA, as axe-core names them; its rules find about half of what can be wrong.
const TAGS = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22a', 'wcag22aa'];
const WIDTHS = [360, 1440];

const services = servicesOf();
const complaints = new Complaints();
let browser: Browser;
let place: Named;
const contexts = new Map<string, BrowserContext>();

beforeAll(async () => {
  browser = await openChromium();
  place = await placesOf(services, 'MF-0181', 'own');
  const emails = { customer: 'isolde.wintermere', maker: 'juno.askerby', owner: 'wren.addlecombe' };
  const viewport = { width: 360, height: 800 };
  contexts.set('guest', await openContext(browser, { who: 'guest', viewport, complaints }));
  for (const [role, name] of Object.entries(emails)) {
    const session = await openSession(services, (await personOf(services, `${name}@example.org`)).id);
    contexts.set(role, await openContext(browser, { who: role, viewport, complaints, session }));
  }
});

afterAll(async () => {
  await browser.close();
  await services.pool.end();
});

/** Who a page is made for. */
function readerOf(pattern: string, rule: Rule): 'guest' | 'customer' | 'maker' | 'owner' {
  if (rule.open !== undefined) return 'guest';
  if (pattern.startsWith('/studio')) return 'owner';
  return pattern.startsWith('/bench') ? 'maker' : 'customer';
}

interface PageToRead {
  path: string;
  reader: ReturnType<typeof readerOf>;
}

async function everyPage(): Promise<PageToRead[]> {
  const pages: PageToRead[] = [];
  for (const { pattern } of routeFiles()) {
    const rule = RULES[pattern]?.GET;
    if (!rule || pattern.startsWith('/api/') || pattern.endsWith('.json') || pattern === '/health') continue;
    const named = isAboutSomething(pattern) ? place : NOWHERE;
    const path = await fillIn(services, `${pattern}${rule.query ?? ''}`, named);
    pages.push({ path, reader: readerOf(pattern, rule) });
  }
  // What cannot be found in a folder: a refused form, a piece of one's own, an enquiry with something in it.
  pages.push({ path: '/price?what=own', reader: 'guest' });
  pages.push({ path: '/price/enquire?what=form&form=palstave', reader: 'guest' });
  pages.push({ path: `/commissions/${'MF-9999'}`, reader: 'customer' });
  return pages;
}

async function faultsOf({ path, reader }: PageToRead): Promise<string[]> {
  const page = await contexts.get(reader)!.newPage();
  const faults: string[] = [];
  try {
    await page.goto(path, { waitUntil: 'load' });
    for (const width of WIDTHS) {
      await page.setViewportSize({ width, height: 800 });
      const overflow = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
      if (overflow > 0) faults.push(`${path} at ${width}: ${overflow} px too wide`);
      const { violations } = await new AxeBuilder({ page }).setLegacyMode(true).withTags(TAGS).analyze();
      for (const { id, nodes } of violations) {
        faults.push(`${path} at ${width}: ${id}, ${nodes.map((node) => node.html.slice(0, 120)).join(' | ')}`);
      }
    }
  } finally {
    await page.close();
  }
  return faults;
}

describe('every page', () => {
  it('has no axe violation and fits, at 360 and at 1440 px, for the reader it is made for', async () => {
    const pages = await everyPage();
    expect(pages.length).toBeGreaterThan(30);
    const faults: string[] = [];
    for (let at = 0; at < pages.length; at += 3) {
      faults.push(...(await Promise.all(pages.slice(at, at + 3).map(faultsOf))).flat());
    }
    expect(faults).toEqual([]);
    // A page that answers 401, 403, 404 or 500 as its own purpose is noted by the browser; nothing else may be.
    expect(complaints.all.filter((line) => !/\/(401|403|404|500|MF-9999)\b/.test(line))).toEqual([]);
  });
});
