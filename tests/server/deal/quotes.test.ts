import { createHash } from 'node:crypto';
import { eq, sql } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { swordFromFile } from '../../../src/demo/drafts';
import { demoRates } from '../../../src/demo/rates';
import { commissions } from '../../../src/server/db/schema/commissions';
import { quotes } from '../../../src/server/db/schema/quotes';
import { mails, rateVersions } from '../../../src/server/db/schema/studio';
import { isIntact } from '../../../src/server/quote/quote-body';
import { openDesk, repriceDraft } from '../../../src/server/quote/quote-desk';
import { customerView, readCustomerQuote, readQuotes } from '../../../src/server/quote/quote-view';
import { sendQuote, withdrawQuote } from '../../../src/server/quote/quotes';
import { recordRights } from '../../../src/server/enquiry/rights';
import {
  codeOf,
  commission,
  letters,
  newEnquiry,
  openSetting,
  putDraft,
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

async function quotesOf(ref: string) {
  return readQuotes(setting.services.db, (await commission(setting, ref)).id);
}

async function refusal(ref: string, change: Parameters<typeof savedDraft>[2]) {
  const { version, revision } = await savedDraft(setting, ref, change);
  const outcome = await sendQuote(setting.services, setting.owner, ref, { version, revision, freeze: true });
  return outcome.ok ? null : outcome.problem;
}

describe('T7, the first revision', () => {
  it('of the worked example is frozen with its prices, its hash and M7', async () => {
    const ref = await newEnquiry(setting);
    const draft = { ...swordFromFile(), termsVersion: '2026-1' };
    const versions = await putDraft(setting, ref, draft);
    const sent = await sendQuote(setting.services, setting.owner, ref, { ...versions, freeze: true });
    expect(codeOf(sent)).toBe('ok');
    const [quote] = await quotesOf(ref);
    const view = customerView(quote!, START);
    // Worked example 1 of the studio's pricing model: 2,190 + 59 carriage, 20 % VAT, stages 660.00, 546.00, 1,492.80.
    expect(view.totals).toEqual({ netMinor: 224_900, taxMinor: 44_980, grossMinor: 269_880 });
    expect(view.stages.map((stage) => stage.grossMinor)).toEqual([66_000, 54_600, 149_280]);
    expect(isIntact(quote!)).toBe(true);
    expect(sent.ok && sent.value.sha256).toBe(quote!.sha256);
    expect((await commission(setting, ref)).deal).toBe('quoted');
    expect((await letters(setting, ref)).filter((letter) => letter.startsWith('M7'))).toHaveLength(1);
  });

  it('has the hash that anybody reckons from its text: sorted keys, no spaces, SHA-256 over UTF-8', async () => {
    const ref = await newEnquiry(setting);
    const { sha256 } = await sentQuote(setting, ref);
    const [quote] = await quotesOf(ref);
    const sorted = (value: unknown): unknown =>
      Array.isArray(value)
        ? value.map(sorted)
        : typeof value === 'object' && value !== null
          ? Object.fromEntries(
              Object.entries(value)
                .sort(([a], [b]) => (a < b ? -1 : 1))
                .map(([key, item]) => [key, sorted(item)]),
            )
          : value;
    const text = JSON.stringify(sorted(quote!.body));
    expect(createHash('sha256').update(text).digest('hex')).toBe(sha256);
  });

  it('pressed twenty times at once is one revision', async () => {
    const ref = await newEnquiry(setting);
    const { version, revision } = await savedDraft(setting, ref);
    const press = () => sendQuote(setting.services, setting.owner, ref, { version, revision, freeze: true });
    const sent = await Promise.all(Array.from({ length: 20 }, press));
    expect(new Set(sent.map((outcome) => (outcome.ok ? outcome.value.sha256 : outcome.problem.code))).size).toBe(1);
    expect(sent[0]!.ok).toBe(true);
    expect(await quotesOf(ref)).toHaveLength(1);
  });

  it.each([
    [
      'a line without hours, amount or reason',
      'lines.0.zeroReason',
      (d: ReturnType<typeof swordFromFile>) => ({
        ...d,
        lines: d.lines.map((line, index) => (index ? line : { ...line, minutes: 0, materialsMinor: 0 })),
      }),
    ],
    [
      'a price outside the range shown, without a reason',
      'outOfRangeReason',
      (d: ReturnType<typeof swordFromFile>) => ({
        ...d,
        price: { kind: 'own' as const, workMinor: 900_000, reason: 'A gilded grip.' },
      }),
    ],
    [
      'a validity longer than the metal’s price holds',
      'validityDays',
      (d: ReturnType<typeof swordFromFile>) => ({
        ...d,
        validityDays: 60,
      }),
    ],
  ])('is refused for %s', async (_what, field, change) => {
    const ref = await newEnquiry(setting);
    const problem = await refusal(ref, change);
    expect(problem?.fields?.[field]).toEqual(expect.any(String));
    expect((await commission(setting, ref)).deal).toBe('enquiry');
    expect(await quotesOf(ref)).toHaveLength(0);
  });

  it('passes with a written reason for a price outside the range, which the customer reads', async () => {
    const ref = await newEnquiry(setting);
    await sentQuote(setting, ref, (draft) => ({
      ...draft,
      price: { kind: 'own', workMinor: 900_000, reason: 'A gilded grip.' },
      outOfRangeReason: 'You asked for a gilded grip, which we had not reckoned with.',
    }));
    const view = customerView((await quotesOf(ref))[0]!, START);
    expect(view.outOfRangeReason).toContain('gilded');
    expect(view.lines[0]!.netMinor).toBe(900_000);
  });

  it('is refused while the source of the design is unknown, or its licence forbids a sale', async () => {
    const { services, owner } = setting;
    const unknown = await newEnquiry(setting, { designSource: 'unknown' });
    expect((await refusal(unknown, undefined))?.message).toContain('source');
    await recordRights(services, owner, unknown, { designSource: 'own', rightsNote: 'Signed drawing.' });
    expect(await refusal(unknown, undefined)).toBeNull();
    const free = await newEnquiry(setting, { designSource: 'internet', licence: 'non-commercial' });
    expect((await refusal(free, undefined))?.message).toContain('licence');
  });

  it('is refused unsaved, stale or for another revision than the next', async () => {
    const { services, owner } = setting;
    const ref = await newEnquiry(setting);
    const send = (version: number, revision: number) =>
      sendQuote(services, owner, ref, { version, revision, freeze: true });
    expect(codeOf(await send(1, 1))).toBe('conflict');
    await savedDraft(setting, ref);
    expect(codeOf(await send(2, 1))).toBe('stale');
    expect(codeOf(await send(1, 2))).toBe('stale');
  });
});

describe('T8, a later revision', () => {
  it('withdraws the one before in the same stroke and tells what changed for the buyer', async () => {
    const { services } = setting;
    const ref = await newEnquiry(setting);
    await sentQuote(setting, ref);
    await sentQuote(setting, ref, (draft) => ({
      ...draft,
      includedRounds: 4,
      pricing: { ...draft.pricing, margin: 0.3 },
      outOfRangeReason: 'More rounds.',
    }));
    expect((await quotesOf(ref)).map(({ revision, state }) => [revision, state])).toEqual([
      [1, 'withdrawn'],
      [2, 'sent'],
    ]);
    const { id } = await commission(setting, ref);
    const sent = await services.db.select().from(mails).where(eq(mails.commissionId, id));
    const [letter] = sent.filter((mail) => mail.letter === 'M8');
    const { changes, replaces } = letter!.data as { changes: string[]; replaces: number };
    expect(replaces).toBe(1);
    expect(changes.join('\n')).toMatch(/Total: .+ → .+\n.*Rounds of change included: \d+ → 4/);
    expect(JSON.stringify(letter!.data)).not.toMatch(/margin/i);
  });

  it('withdrawing alone leaves nothing to accept, and is done once', async () => {
    const { services, owner } = setting;
    const ref = await newEnquiry(setting);
    await sentQuote(setting, ref);
    expect(codeOf(await withdrawQuote(services, owner, ref, 1, { reason: 'Wrong alloy.' }))).toBe('ok');
    expect(codeOf(await withdrawQuote(services, owner, ref, 1, {}))).toBe('ok');
    expect(codeOf(await withdrawQuote(services, owner, ref, 7, {}))).toBe('not-found');
    const view = await readCustomerQuote(services, setting.customer, ref, 1);
    expect(view).toMatchObject({ ok: true, value: { state: 'withdrawn', open: false } });
  });
});

describe('T10, after a lapse', () => {
  it('needs today’s metal, then sends the next revision', async () => {
    const { services, owner, clock } = setting;
    const ref = await newEnquiry(setting);
    await sentQuote(setting, ref);
    const row = await commission(setting, ref);
    await services.db.update(quotes).set({ state: 'lapsed' }).where(eq(quotes.commissionId, row.id));
    await services.db.update(commissions).set({ deal: 'lapsed' }).where(eq(commissions.id, row.id));
    const dearer = demoRates.alloys.map((alloy) => ({ ...alloy, ingotMinorPerKg: alloy.ingotMinorPerKg + 500 }));
    clock.now = new Date(START.getTime() + 1000);
    await services.db
      .insert(rateVersions)
      .values({ id: uuidv7(), rates: { ...demoRates, alloys: dearer, version: 'dearer' }, createdAt: clock.now });
    expect((await refusal(ref, undefined))?.message).toContain('today’s rates');
    const desk = await openDesk(services, owner, ref);
    if (!desk.ok) throw new Error(desk.problem.message);
    expect(desk.value.ratesChanged).toBe(true);
    const repriced = await repriceDraft(services, owner, ref, { version: desk.value.version });
    if (!repriced.ok) throw new Error(repriced.problem.message);
    const sent = await sendQuote(services, owner, ref, { ...repriced.value, freeze: true });
    expect(sent).toMatchObject({ ok: true, value: { revision: 2 } });
    expect((await commission(setting, ref)).deal).toBe('quoted');
    await services.db.delete(rateVersions).where(sql`${rateVersions.rates} ->> 'version' = 'dearer'`);
  });
});

describe('a sent revision', () => {
  it('stays as it was sent when rates, catalogue and terms change, and cannot be rewritten', async () => {
    const { services } = setting;
    const ref = await newEnquiry(setting);
    await sentQuote(setting, ref);
    const [before] = await quotesOf(ref);
    const dear = { ...demoRates, benchRateMinorPerHour: 9_900, version: 'dear' };
    await services.db.insert(rateVersions).values({ id: uuidv7(), rates: dear, createdAt: new Date('2028-01-01') });
    const [after] = await quotesOf(ref);
    expect(after).toEqual(before);
    expect(isIntact(after!)).toBe(true);
    await services.db.delete(rateVersions).where(sql`${rateVersions.rates} ->> 'version' = 'dear'`);
    const rewrite = services.db
      .update(quotes)
      .set({ body: { draft: {} } })
      .where(eq(quotes.id, before!.id));
    await expect(rewrite).rejects.toMatchObject({ cause: { message: expect.stringContaining('frozen') } });
    expect(isIntact({ ...after!, body: { ...(after!.body as object), extra: 1 } })).toBe(false);
  });

  it('shows its customer nothing the studio reckons with, and strangers nothing at all', async () => {
    const { services, customer, other, maker, bookkeeper, owner } = setting;
    const ref = await newEnquiry(setting);
    const draft = { ...swordFromFile(), termsVersion: '2026-1' };
    const versions = await putDraft(setting, ref, draft);
    await sendQuote(services, owner, ref, { ...versions, freeze: true });
    const read = await readCustomerQuote(services, customer, ref, 1);
    if (!read.ok) throw new Error(read.problem.message);
    const text = JSON.stringify(read.value);
    expect(text).not.toMatch(/margin|chance|loss|soundness|alpha|beta|minutes|rateMinor|exposure|p80|sums|hand/i);
    for (const line of draft.lines) expect(text).not.toContain(JSON.stringify(line.label));
    for (const actor of [other, maker, null])
      expect(codeOf(await readCustomerQuote(services, actor, ref, 1))).not.toBe('ok');
    for (const actor of [owner, bookkeeper])
      expect(codeOf(await readCustomerQuote(services, actor, ref, 1))).toBe('ok');
  });
});
