import { afterAll, beforeAll, expect, it } from 'vitest';
import { POST } from '../../../src/pages/api/enquiries/index';
import { GET as mine } from '../../../src/pages/api/uploads/mine';
import { demoRates } from '../../../src/demo/rates';
import { takeFormReturn } from '../../../src/server/door';
import { uploads } from '../../../src/server/db/schema/commissions';
import { rateVersions } from '../../../src/server/db/schema/studio';
import type { Services } from '../../../src/server/services';
import { createTestServices } from '../../setup/database';
import { Browser } from '../auth/knock';

const BROWSER = 'a-browser-of-the-tests';
let services: Services;
let drop: () => Promise<void>;

const typed = {
  clientId: 'enquiry-0001',
  form: 'spearhead',
  lengthMm: '180',
  name: 'Orla Penhallow',
  email: 'orla@example.org',
  wish: 'A spear for the shield wall, blunt enough to carry.',
  use: 'reenactment',
  designSource: 'studio-form',
  adult: 'yes',
  consent: 'yes',
};

beforeAll(async () => {
  ({ services, drop } = await createTestServices());
  const id = '019b0000-0000-7000-8000-000000000001';
  await services.db.insert(rateVersions).values({ id, rates: demoRates, createdAt: new Date('2026-11-01T09:00:00Z') });
});
afterAll(() => drop());

it('sends a refused form back to its piece with every word and every reason', async () => {
  const { consent: _left, adult: _out, ...without } = typed;
  const response = await new Browser(services).post(POST, { ...without, budget: 'abc' });
  expect(response.status).toBe(303);
  const url = new URL(response.headers.get('location') ?? '', 'http://localhost');
  expect(url.pathname).toBe('/price/enquire');
  expect(Object.fromEntries(url.searchParams)).toMatchObject({ form: 'spearhead', lengthMm: '180' });
  const request = new Request(url);
  const kept = await takeFormReturn({ request, url, locals: { services, user: null, browserId: BROWSER } });
  expect(kept?.values).toMatchObject({ ...without, budget: 'abc' });
  expect(Object.keys(kept?.problem.fields ?? {}).sort()).toEqual(['budget', 'consent']);
});

it('asks a guest to confirm, and answers a second press with the same enquiry', async () => {
  const browser = new Browser(services);
  const answers = [await browser.post(POST, typed), await browser.post(POST, typed, { json: true })];
  const [form, island] = answers;
  expect(form!.headers.get('location')).toMatch(/^\/price\/sent\?ref=MF-\d{4}$/);
  expect(((await island!.json()) as { to: string }).to).toBe(form!.headers.get('location'));
});

it('refuses a form that a program filled in, and a blade without a declaration', async () => {
  const browser = new Browser(services);
  const refusal = async (change: Record<string, string>) => {
    const response = await browser.post(POST, { ...typed, clientId: 'enquiry-0002', ...change }, { json: true });
    const body = (await response.json()) as { problem?: { fields?: Record<string, string> } };
    return Object.keys(body.problem?.fields ?? {});
  };
  expect(await refusal({ website: 'https://example.org' })).toEqual(['website']);
  expect(await refusal({ adult: '' })).toEqual(['adult']);
});

it('lists the files of this browser that no enquiry holds, and nobody else’s', async () => {
  const file = (n: number, browserId: string) => ({
    id: `019b0000-0000-7000-8000-00000000010${n}`,
    clientId: `file-000${n}`,
    browserId,
    kind: 'document' as const,
    displayName: `drawing-${n}.pdf`,
    mime: 'application/pdf',
    bytes: 1000,
    sha256: 'a'.repeat(64),
    storageKey: `uploads/aa/${n}.pdf`,
    createdAt: new Date(Date.UTC(2026, 11, 1, 9, n)),
  });
  await services.db.insert(uploads).values([file(2, BROWSER), file(1, BROWSER), file(3, 'another-browser')]);
  const body = (await (await new Browser(services).get(mine)).json()) as { files: { name: string }[] };
  expect(body.files.map(({ name }) => name)).toEqual(['drawing-1.pdf', 'drawing-2.pdf']);
});
