import fc from 'fast-check';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { rateCardSchema, type RateCard } from '../../../src/commission/pricing/estimate-request';
import { reckon } from '../../../src/commission/pricing/price-view';
import { demoRates } from '../../../src/demo/rates';
import { GET } from '../../../src/pages/api/rates/card';
import { POST } from '../../../src/pages/api/estimates/index';
import { currentRateCard } from '../../../src/server/pricing/rates';
import { rateVersions } from '../../../src/server/db/schema/studio';
import type { Services } from '../../../src/server/services';
import { anyFields } from '../../commission/any-fields';
import { createTestServices } from '../../setup/database';
import { Browser } from '../auth/knock';

let services: Services;
let drop: () => Promise<void>;
let fetched: RateCard;

beforeAll(async () => {
  ({ services, drop } = await createTestServices());
  const id = '019b0000-0000-7000-8000-000000000001';
  await services.db.insert(rateVersions).values({ id, rates: demoRates, createdAt: new Date('2026-11-01T09:00:00Z') });
  const response = await new Browser(services).get(GET);
  fetched = rateCardSchema.parse(await response.json());
});
afterAll(() => drop());

it('reckons in the page what the server reckons, to the penny', async () => {
  const server = await currentRateCard(services);
  fc.assert(
    fc.property(anyFields, (fields) => {
      expect(reckon(fields, fetched)).toEqual(reckon(fields, server));
    }),
    { numRuns: 200 },
  );
});

// The studio's list of forms gives this sword from 1,625, to 2,370, with 410 and 165 before it is cast.
it('answers the catalogue’s own figures at the door', async () => {
  const response = await new Browser(services).post(POST, { form: 'leaf-shaped-sword' }, { json: true });
  expect(await response.json()).toMatchObject({
    ok: true,
    value: {
      fromMinor: 162_500,
      rangeMinor: { high: 237_000 },
      stages: [{ netMinor: 41_000 }, { netMinor: 16_500 }, { id: 'balance' }],
    },
  });
});

it('says at the door which field to change', async () => {
  const response = await new Browser(services).post(POST, { form: 'leaf-shaped-sword', pieces: '99' }, { json: true });
  expect(response.status).toBe(422);
  expect(await response.json()).toMatchObject({ ok: false, problem: { fields: { pieces: expect.any(String) } } });
});

it('keeps furnaces and the diary of weeks at home', async () => {
  const text = await (await new Browser(services).get(GET)).text();
  expect(text).not.toContain('pourDay');
  expect(text).not.toContain('crucibles');
  expect(fetched.rates.throughput.finishedHoursByWeek).not.toEqual(demoRates.throughput.finishedHoursByWeek);
});

it('is sent again only when it changed', async () => {
  const first = await new Browser(services).get(GET);
  const etag = first.headers.get('etag') ?? '';
  const request = new Request('http://localhost/api/rates/card', { headers: { 'if-none-match': etag } });
  const again = await GET({ request, locals: { services } } as Parameters<typeof GET>[0]);
  expect([first.status, again.status, await again.text()]).toEqual([200, 304, '']);
  expect(first.headers.get('cache-control')).toBe('no-cache');
});
