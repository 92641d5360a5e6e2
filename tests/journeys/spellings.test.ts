import { request } from 'node:http';
import { afterAll, describe, expect, it } from 'vitest';
import { guard } from '../../src/server/auth/guards';
import { routeFiles } from './routes/route-files';
import { fillIn, placesOf } from './routes/targets';
import { personOf, signedIn } from './scene';
import { places, servicesOf } from './studio';

const services = servicesOf();
afterAll(() => services.pool.end());

/**
 * Other ways to write the path of a guarded page. `//`, `/\` and encoded slashes reached pages past checks that compare
 * paths in Astro 5 (withastro/astro pull requests 15717 and 15742, CVE-2025-64765, CVE-2025-66202); the rest are the
 * usual path confusions of OWASP WSTG, authorization testing.
 */
function spellings(path: string): string[] {
  const [, first = '', ...rest] = path.split('/');
  const tail = rest.length > 0 ? `/${rest.join('/')}` : '';
  const inner = path.slice(1);
  return [
    `/${path}`,
    `//${path}`,
    `/\\${inner}`,
    `\\${path}`,
    `/%2f${inner}`,
    `/%2F${inner}`,
    `/%5c${inner}`,
    `/.${path}`,
    `/./${inner}`,
    `/forms/..${path}`,
    `/forms/../..${path}`,
    `/forms/..%2f${inner}`,
    `/%2e%2e${path}`,
    `/${first}/..%2f${first}${tail}`,
    `/${first}/.${tail || '/'}`,
    `${path}/..${path}`,
    `${path}//`,
    `${path}/.`,
    `${path}.`,
    `${path}..`,
    `${path}%00`,
    `${path}%2e`,
    `${path}%5c`,
    `${path}%252f`,
    path.toUpperCase(),
    `/${first.charAt(0).toUpperCase()}${first.slice(1)}${tail}`,
    `/%${first.charCodeAt(0).toString(16)}${inner.slice(1)}`,
    path.replaceAll('/', '//'),
    path.replaceAll('/', '\\'),
    `${places.url}/${path}`,
  ];
}

/** Sends a path exactly as it is written; `fetch` would mend it first. */
function rawGet(path: string, cookie: string): Promise<{ status: number; location: string; body: string }> {
  const { hostname, port } = new URL(places.url);
  return new Promise((resolve, reject) => {
    const headers = { accept: 'text/html', ...(cookie ? { cookie } : {}) };
    const sent = request({ hostname, port, path, headers }, (response) => {
      let body = '';
      response.on('data', (chunk: Buffer) => (body += chunk));
      response.on('end', () =>
        resolve({ status: response.statusCode ?? 0, location: response.headers.location ?? '', body }),
      );
    });
    sent.once('error', reject);
    sent.end();
  });
}

describe('other spellings of guarded pages', () => {
  it('open nothing, to a guest or to somebody of the wrong role', async () => {
    const guarded = routeFiles().filter((file) => file.methods.includes('GET') && guard(file.pattern, null) !== 'open');
    expect(guarded.length).toBeGreaterThan(10);
    const place = await placesOf(services, 'MF-0181', 'own');
    const maker = await signedIn(services, await personOf(services, 'juno.askerby@example.org'));
    const stranger = await signedIn(services, await personOf(services, 'maud.evershade@example.org'));
    const opened: string[] = [];
    for (const file of guarded) {
      const path = await fillIn(services, file.pattern, place);
      const wrong = /^\/(bench|api\/bench)/.test(path) ? stranger : maker;
      const cookie = [...wrong.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
      const asGuest = [...new Set(spellings(path))];
      expect(asGuest.length).toBeGreaterThanOrEqual(18);
      for (const spelled of asGuest) {
        const guest = await rawGet(spelled, '');
        const turned = guest.status === 303 && guest.location.startsWith('/sign-in');
        if (!turned && ![400, 401, 404].includes(guest.status)) opened.push(`guest ${spelled}: ${guest.status}`);
        if (/^\/(account|commissions)$/.test(path)) continue;
        const other = await rawGet(spelled, cookie);
        if (![400, 403, 404].includes(other.status)) opened.push(`wrong role ${spelled}: ${other.status}`);
      }
    }
    expect(opened).toEqual([]);
  });
});
