import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { z } from 'zod';
import { answersSchema, askSchema } from '../../../src/commission/enquiry/checklist';
import { unflatten } from '../../../src/commission/input-fields';
import { deskSchema } from '../../../src/commission/pricing/desk';
import { ratesFormSchema } from '../../../src/commission/pricing/rates-form';
import { formReturns } from '../../../src/server/db/schema/people';
import { answer, readInput, type DoorContext } from '../../../src/server/door';
import type { Services } from '../../../src/server/services';
import { readMultipart } from '../../../src/server/storage/multipart';
import { createTestServices } from '../../setup/database';

let services: Services;
let drop: () => Promise<void>;
beforeAll(async () => {
  ({ services, drop } = await createTestServices());
});
afterAll(() => drop());

const PAGE = 'http://localhost:4321/form';
/** What the front server lets through of a form: one megabyte. */
const MOST_BYTES = 1024 * 1024;

function sent(body: string, type: string, headers: Record<string, string> = {}): DoorContext {
  const request = new Request(PAGE, { method: 'POST', body, headers: { 'content-type': type, ...headers } });
  return { request, url: new URL(PAGE), locals: { services, user: null, browserId: 'browser-of-the-test' } };
}
const form = (body: string) => sent(body, 'application/x-www-form-urlencoded');
const json = (body: string) => sent(body, 'application/json');
const nested = (depth: number) => `{"answers":${'{"a":'.repeat(depth)}1${'}'.repeat(depth)}}`;
const fields = (count: number) => Array.from({ length: count }, (_, index) => `k${index}=1`).join('&');

// OWASP ASVS 5.0, 15.2.2: no loss of availability by what is costly to work out. Each of these once took the
// server down or held it up for seconds; the test's own time-out is the limit.
describe('a body made to be costly', () => {
  it.each([
    ['sixty thousand names', form(fields(60_000))],
    ['one list of a hundred thousand', form('e[]=1&'.repeat(100_000))],
    ['objects nested three thousand deep', json(nested(3_000))],
    ['lists nested seven thousand deep', json(`{"answers":${'['.repeat(7_000)}1${']'.repeat(7_000)}}`)],
    ['objects nested without end', json(nested(100_000))],
  ])('of %s is refused', async (_what, context) => {
    expect(await readInput(context, answersSchema)).toMatchObject({ ok: false, problem: { code: 'invalid' } });
  });

  it.each([
    ['questions', askSchema],
    ['answers', answersSchema],
    ['the desk', deskSchema],
    ['rates', ratesFormSchema],
  ])('of one name with half a million parts is read at once by the schema of %s', async (_what, schema) => {
    const long = `${'a.'.repeat(MOST_BYTES / 2 - 4)}b=1`;
    const read = await readInput(form(long), z.looseObject({}));
    expect(read.ok).toBe(true);
    if (read.ok) expect(schema.safeParse(read.value).success).toBe(schema === answersSchema);
  });

  it('of more answers than were ever asked for is refused before the database hears of it', () => {
    const id = (index: number) => `00000000-0000-4000-8000-${String(index).padStart(12, '0')}`;
    const many = Object.fromEntries(Array.from({ length: 5_000 }, (_, index) => [id(index), 'bright']));
    expect(answersSchema.safeParse({ answers: many }).success).toBe(false);
  });

  it('is not kept for the page that shows what was typed', async () => {
    const context = form(`wish=${'x'.repeat(MOST_BYTES - 10)}`);
    const refused = await readInput(context, z.object({ name: z.string('Tell us your name.') }));
    await answer(context, refused, { to: '/done', back: '/form' });
    const [kept] = await services.db.select().from(formReturns);
    expect(kept).toMatchObject({ values: {}, problem: { fields: { name: 'Tell us your name.' } } });
  });
});

// OWASP ASVS 5.0, 15.3.6: no prototype is changed by what was sent.
describe('names that mean something to JavaScript', () => {
  it.each([
    '__proto__.seen=1',
    'constructor.prototype.seen=1',
    'a.__proto__.seen=1',
    '__proto__[]=seen',
    '__proto__=1',
  ])('as %s change nothing', async (body) => {
    const read = await readInput(form(body), z.looseObject({}));
    expect(read.ok).toBe(true);
    if (read.ok) unflatten(read.value);
    expect(({} as { seen?: unknown }).seen).toBeUndefined();
    expect(Object.getPrototypeOf(Object.prototype)).toBeNull();
  });
});

describe('a form with a file', () => {
  it('is refused when one of its texts holds a zero character', async () => {
    const body = new FormData();
    body.set('caption', 'the\0tip');
    body.set('file', new File(['x'], 'tip.png'));
    const request = new Request(PAGE, { method: 'POST', body });
    const read = await readMultipart(request, services.config.uploadsFolder, { bytes: 100, words: '100 bytes' });
    expect(read).toMatchObject({ ok: false, problem: { code: 'invalid' } });
  });
});

// OWASP ASVS 5.0, 3.5.1 and 3.5.2: a request of another site's page does nothing, of whatever type it is.
describe('another site', () => {
  it.each([
    ['an origin of its own', { origin: 'https://evil.example' }],
    ['no origin it would name', { origin: 'null' }],
    ['the same name on another port', { origin: 'http://localhost:9' }],
    ['only what the browser says of it', { 'sec-fetch-site': 'cross-site' }],
  ])('with %s is refused', async (_what, headers) => {
    for (const type of ['application/json', 'application/x-www-form-urlencoded', 'text/plain']) {
      const read = await readInput(sent('{}', type, headers as Record<string, string>), z.looseObject({}));
      expect(read, type).toMatchObject({ ok: false, problem: { code: 'not-allowed' } });
    }
  });
});
