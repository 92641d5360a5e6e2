import { afterAll, beforeAll, expect, it } from 'vitest';
import { routeFiles } from './routes/route-files';
import { personOf, signedIn } from './scene';
import { places, servicesOf } from './studio';
import type { Visitor } from './visitor';

/** Signed by their senders instead, which are no browsers. */
const WEBHOOKS = ['/api/stripe/webhook', '/api/resend/webhook'];
const NOTHING = '019b0000-0000-7000-8000-000000000000';

const FORM = 'application/x-www-form-urlencoded';
const MULTIPART = 'multipart/form-data; boundary=b';
const TYPES = [FORM, MULTIPART, 'text/plain', 'application/json', 'application/octet-stream', ''];
const FROM: Record<string, string>[] = [
  { origin: 'https://evil.example' },
  { origin: 'null' },
  { 'sec-fetch-site': 'cross-site' },
];

const services = servicesOf();
let owner: Visitor;
beforeAll(async () => {
  owner = await signedIn(services, await personOf(services, 'wren.addlecombe@example.org'));
});
afterAll(() => services.pool.end());

function doors(): { method: string; path: string }[] {
  const changing = routeFiles().filter(({ pattern }) => !WEBHOOKS.includes(pattern));
  return changing.flatMap(({ pattern, methods }) =>
    methods
      .filter((method) => method !== 'GET')
      .map((method) => ({ method, path: pattern.replace('[ref]', 'MF-0181').replace(/\[[^\]]+\]/g, NOTHING) })),
  );
}

async function knock(method: string, path: string, type: string, from: Record<string, string>): Promise<number> {
  const cookie = [...owner.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
  const headers = { cookie, accept: 'text/html', ...from, ...(type && { 'content-type': type }) };
  // Bytes carry no type of their own, as text would.
  const body = new TextEncoder().encode(type === MULTIPART ? '--b--\r\n' : '{}');
  return (await fetch(`${places.url}${path}`, { method, headers, body, redirect: 'manual' })).status;
}

// OWASP ASVS 5.0, 3.5.1 and 3.5.2: nothing is done at the wish of another site's page, however it is sent.
it('no door does anything for another site’s page, whoever is signed in and whatever is sent', async () => {
  const opened: string[] = [];
  for (const { method, path } of doors()) {
    for (const type of TYPES) {
      for (const from of FROM) {
        const status = await knock(method, path, type, from);
        if (status !== 403) opened.push(`${method} ${path} as ${type} from ${JSON.stringify(from)}: ${status}`);
      }
    }
  }
  expect(opened).toEqual([]);
  expect(doors().length).toBeGreaterThan(35);
});
