import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { acceptSchema } from '../../../src/commission/enquiry/triage';
import { acceptQuote } from '../../../src/server/quote/acceptance';
import { events } from '../../../src/server/db/schema/commissions';
import { acceptances, quotes, stagePayments } from '../../../src/server/db/schema/quotes';
import { withdrawQuote, sendQuote } from '../../../src/server/quote/quotes';
import { readCustomerCommission } from '../../../src/server/views/customer-commission';
import {
  codeOf,
  commission,
  letters,
  newEnquiry,
  openSetting,
  savedDraft,
  sentQuote,
  START,
  type Setting,
} from './deal-setting';

let setting: Setting;
beforeAll(async () => {
  setting = await openSetting();
});
afterAll(() => setting.drop());

const DAY = 24 * 60 * 60_000;
const YES = acceptSchema.parse({
  revision: '1',
  typedName: 'Isolde Wintermere',
  terms: 'yes',
  bespoke: 'yes',
  mark: 'yes',
  adult: 'yes',
});

async function quoted() {
  const ref = await newEnquiry(setting);
  await sentQuote(setting, ref);
  return ref;
}
const accept = (ref: string, changes: Partial<typeof YES> = {}, actor = setting.customer) =>
  acceptQuote(setting.services, actor, ref, { ...YES, ...changes }, '192.0.2.5');

async function acceptanceRows(ref: string) {
  const { id } = await commission(setting, ref);
  return setting.services.db.select().from(acceptances).where(eq(acceptances.commissionId, id));
}

describe('T11, accepting', () => {
  it('keeps the evidence, writes the agreed stages, makes the first one due and tells both sides', async () => {
    const { services } = setting;
    const ref = await quoted();
    expect(codeOf(await accept(ref))).toBe('ok');
    const row = await commission(setting, ref);
    const [quote] = await services.db.select().from(quotes).where(eq(quotes.commissionId, row.id));
    const [evidence] = await acceptanceRows(ref);
    expect(row.deal).toBe('agreed');
    expect(quote!.state).toBe('accepted');
    expect(evidence).toMatchObject({
      quoteSha256: quote!.sha256,
      typedName: 'Isolde Wintermere',
      address: '192.0.2.5',
      acceptedBy: setting.customer.id,
      declarations: { terms: true, bespoke: true, mark: true, adult: true },
      termsSha256: expect.stringMatching(/^[0-9a-f]{64}$/),
    });
    const stages = await services.db.select().from(stagePayments).where(eq(stagePayments.commissionId, row.id));
    const { priced } = quote!.body as { priced: { stages: { grossMinor: number }[]; totals: { grossMinor: number } } };
    expect(stages.map((stage) => stage.grossMinor)).toEqual(priced.stages.map((stage) => stage.grossMinor));
    expect(stages.reduce((sum, stage) => sum + stage.grossMinor, 0)).toBe(priced.totals.grossMinor);
    expect(stages.map((stage) => stage.dueAt)).toEqual([
      new Date(START.getTime() + 7 * DAY),
      ...stages.slice(1).map(() => null),
    ]);
    expect((await letters(setting, ref)).filter((letter) => letter.startsWith('M11'))).toEqual([
      'M11 to isolde@example.org',
      'M11 to wren@example.org',
    ]);
    const lines = await services.db.select().from(events).where(eq(events.commissionId, row.id));
    expect(lines.at(-1)).toMatchObject({ code: 'T11', from: 'quoted', to: 'agreed', actorId: setting.customer.id });
  });

  it('pressed twenty times at once is one acceptance, and every press is told the same', async () => {
    const ref = await quoted();
    const pressed = await Promise.all(Array.from({ length: 20 }, () => accept(ref)));
    for (const outcome of pressed) expect(outcome).toEqual(pressed[0]);
    expect(pressed[0]!.ok).toBe(true);
    expect(await acceptanceRows(ref)).toHaveLength(1);
    const { id } = await commission(setting, ref);
    const stages = await setting.services.db.select().from(stagePayments).where(eq(stagePayments.commissionId, id));
    expect(new Set(stages.map((stage) => stage.position)).size).toBe(stages.length);
    expect((await letters(setting, ref)).filter((letter) => letter.startsWith('M11'))).toHaveLength(2);
  });

  it('and withdrawing at once end in exactly one of the two, every time', async () => {
    const { services, owner } = setting;
    for (let round = 0; round < 25; round += 1) {
      const ref = await quoted();
      const [accepted, withdrawn] = await Promise.all([accept(ref), withdrawQuote(services, owner, ref, 1, {})]);
      expect([accepted.ok, withdrawn.ok].filter(Boolean)).toHaveLength(1);
      const [quote] = await services.db
        .select()
        .from(quotes)
        .where(eq(quotes.commissionId, (await commission(setting, ref)).id));
      expect(quote!.state).toBe(accepted.ok ? 'accepted' : 'withdrawn');
      expect(await acceptanceRows(ref)).toHaveLength(accepted.ok ? 1 : 0);
    }
  }, 60_000);

  it('refuses a withdrawn revision and names the one that took its place', async () => {
    const ref = await quoted();
    await sentQuote(setting, ref, (draft) => ({ ...draft, includedRounds: 3 }));
    const refused = await accept(ref, { revision: 1 });
    expect(refused).toMatchObject({
      ok: false,
      problem: { code: 'stale', message: expect.stringContaining('revision 2') },
    });
    expect(codeOf(await accept(ref, { revision: 2 }))).toBe('ok');
    expect(codeOf(await accept(ref, { revision: 1 }))).toBe('conflict');
    expect(codeOf(await accept(ref, { revision: 9 }))).toBe('not-found');
  });

  it('refuses a quote whose date has passed', async () => {
    const ref = await quoted();
    setting.clock.now = new Date(START.getTime() + 31 * DAY);
    const refused = await accept(ref);
    setting.clock.now = START;
    expect(codeOf(refused)).toBe('stale');
    expect(await acceptanceRows(ref)).toHaveLength(0);
  });

  it('refuses a blade without the declaration of age', async () => {
    const ref = await quoted();
    expect(await accept(ref, { adult: false })).toMatchObject({
      ok: false,
      problem: { code: 'invalid', fields: { adult: expect.any(String) } },
    });
  });

  it.each(['terms', 'bespoke', 'mark', 'typedName'])('refuses without “%s” at its field', (field) => {
    const parsed = acceptSchema.safeParse({ ...YES, [field]: '' });
    expect(parsed.success ? [] : parsed.error.issues.map((issue) => issue.path[0])).toContain(field);
  });

  it('is the customer’s alone', async () => {
    const ref = await quoted();
    const { owner, other, maker, bookkeeper } = setting;
    for (const actor of [owner, other, maker, bookkeeper]) expect(codeOf(await accept(ref, {}, actor))).not.toBe('ok');
    expect(codeOf(await acceptQuote(setting.services, null, ref, YES, ''))).toBe('sign-in-needed');
    expect(await acceptanceRows(ref)).toHaveLength(0);
  });

  it('ends the quoting: neither another revision nor a withdrawal is possible after it', async () => {
    const { services, owner } = setting;
    const ref = await quoted();
    const { version } = await savedDraft(setting, ref, (draft) => ({ ...draft, includedRounds: 3 }));
    await accept(ref);
    expect(codeOf(await sendQuote(services, owner, ref, { version, revision: 2, freeze: true }))).toBe('conflict');
    expect(codeOf(await withdrawQuote(services, owner, ref, 1, {}))).toBe('conflict');
    const removal = services.db.delete(acceptances).where(eq(acceptances.address, '192.0.2.5'));
    await expect(removal).rejects.toMatchObject({ cause: { message: expect.stringContaining('append-only') } });
  });

  it('shows on the customer’s page whose turn it is, without a word of the studio’s reckoning', async () => {
    const ref = await quoted();
    await accept(ref);
    const view = await readCustomerCommission(setting.services, setting.customer, ref);
    if (!view.ok) throw new Error(view.problem.message);
    expect(view.value.turn).toMatchObject({ who: 'customer', sentence: expect.stringContaining('deposit') });
    const { estimate: _shownBefore, ...rest } = view.value;
    expect(JSON.stringify(rest)).not.toMatch(/margin|chanceOf|soundness|alpha|beta|rateMinor|exposure|committed/i);
    expect(codeOf(await readCustomerCommission(setting.services, setting.other, ref))).toBe('not-found');
    expect(codeOf(await readCustomerCommission(setting.services, setting.maker, ref))).toBe('not-allowed');
  });
});
