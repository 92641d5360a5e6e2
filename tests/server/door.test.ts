import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { z } from 'zod';
import { answer, readInput, takeFormReturn, type DoorContext } from '../../src/server/door';
import type { Services } from '../../src/server/services';
import { createTestServices } from '../setup/database';

let services: Services;
let drop: () => Promise<void>;
beforeAll(async () => {
  ({ services, drop } = await createTestServices());
});
afterAll(() => drop());

const schema = z.object({ name: z.string().min(3, 'A name has three letters.') });
const PAGE = 'http://localhost:4321/form';

function context(init: RequestInit, browserId = 'browser'): DoorContext {
  const request = new Request(PAGE, { method: 'POST', ...init });
  return { request, url: new URL(PAGE), locals: { services, user: null, browserId } };
}
const json = (text: string) => context({ body: text, headers: { 'content-type': 'application/json' } });

describe('a door', () => {
  it.each([
    ['a zero character', String.raw`{"name":"a\u0000b"}`],
    ['half of a surrogate pair', String.raw`{"name":"abc\ud800"}`],
    ['a zero character deep inside', String.raw`{"name":"abc","more":[{"x":"\u0000"}]}`],
    ['a zero character in a name', String.raw`{"name":"abc","\u0000":1}`],
    ['brackets nested without end', `{"name":${'['.repeat(100_000)}${']'.repeat(100_000)}}`],
    ['a list', '[]'],
    ['no JSON', '{'],
  ])('refuses %s before anything is stored', async (_what, body) => {
    expect(await readInput(json(body), schema)).toMatchObject({ ok: false, problem: { code: 'invalid' } });
  });

  it('lets ordinary text of any script through', async () => {
    const name = 'Ærø Þór 青銅 𓂀 👩🏽‍🏭';
    expect(await readInput(json(JSON.stringify({ name })), schema)).toEqual({ ok: true, value: { name } });
  });

  it('gives a refused plain form back to the browser that typed it, and to no other', async () => {
    const form = context({ body: new URLSearchParams({ name: 'ab' }) });
    const refused = await readInput(form, schema);
    const response = await answer(form, refused, { to: '/done', back: '/form' });
    const back = new URL(response.headers.get('location')!, PAGE);
    expect(response.status).toBe(303);
    const page = (browserId: string) => ({ ...context({}, browserId), url: back });
    expect(await takeFormReturn(page('browser'))).toMatchObject({
      values: { name: 'ab' },
      problem: { fields: { name: 'A name has three letters.' } },
    });
    expect(await takeFormReturn(page('another'))).toBeNull();
  });
});
