import { existsSync } from 'node:fs';
import { asc, count, eq, ne, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { committedMinor, costToFinish, expectedMargin } from '../../src/commission/pricing/exposure';
import { afterPour } from '../../src/commission/pricing/soundness';
import { daysBetween } from '../../src/commission/turn/turn-facts';
import { demoRates } from '../../src/demo/rates';
import { seedDemo } from '../../src/demo/seed';
import { commissions, events, questions, uploads } from '../../src/server/db/schema/commissions';
import { attempts, gates, photos, pieces } from '../../src/server/db/schema/making';
import { users } from '../../src/server/db/schema/people';
import { ledgerEntries, quotes } from '../../src/server/db/schema/quotes';
import { mails } from '../../src/server/db/schema/studio';
import { readMoney, type MoneyPage } from '../../src/server/money/money-view';
import { bodyOf, isIntact, termsSha256 } from '../../src/server/quote/quote-body';
import { currentRateCard } from '../../src/server/pricing/rates';
import type { Services } from '../../src/server/services';
import { readMargins } from '../../src/server/views/margin-now';
import { pathOf } from '../../src/server/storage/disk';
import { CURRENT_TERMS } from '../../src/commission/terms';
import { createTestServices } from '../setup/database';

/** A Thursday just after midnight: no step of the past may then lie in the future. */
const NOW = new Date('2027-03-04T00:07:00Z');

let services: Services;
let drop: () => Promise<void>;
let money: MoneyPage;

beforeAll(async () => {
  ({ services, drop } = await createTestServices({ now: () => NOW }));
  await seedDemo(services);
  const [owner] = await services.db.select().from(users).where(eq(users.role, 'owner'));
  const page = await readMoney(services, { id: owner!.id, role: 'owner', email: owner!.email, name: owner!.name });
  if (!page.ok) throw new Error(page.problem.message);
  money = page.value;
}, 180_000);
afterAll(() => drop());

const row = async (ref: string) => {
  const [found] = await services.db.select().from(commissions).where(eq(commissions.ref, ref));
  return found!;
};

/** Days since a commission's last event of that code: by the calendar, and by the hour. */
const since = async (ref: string, code: string) => {
  const { id } = await row(ref);
  const all = await services.db.select().from(events).where(eq(events.commissionId, id)).orderBy(asc(events.id));
  const { at } = all.filter((event) => event.code === code).at(-1)!;
  const midnight = new Date(`${at.toISOString().slice(0, 10)}T00:00:00Z`);
  return { calendar: daysBetween(midnight, NOW), hours: daysBetween(at, NOW) };
};

// The demo's control totals, written down before the demo was: minor units.
describe('the control totals', () => {
  it('hold 3,490.80 pounds and 735.00 euros on work that is neither delivered nor cancelled', () => {
    const held = Object.fromEntries(money.totals.map((total) => [total.currency, total.heldMinor]));
    expect(held).toEqual({ GBP: 349_080, EUR: 73_500 });
  });

  it('wait for 4,280.40 pounds, 380.40 of it overdue, and for 1,873.99 euros', () => {
    const waits = money.totals.map(({ currency, toComeMinor, overdueMinor }) => ({
      currency,
      toComeMinor,
      overdueMinor,
    }));
    expect(waits).toEqual([
      { currency: 'GBP', toComeMinor: 428_040, overdueMinor: 38_040 },
      { currency: 'EUR', toComeMinor: 187_399, overdueMinor: 0 },
    ]);
  });

  it('are due nowhere else', () => {
    const due = money.lines.filter((line) => line.balance.dueMinor > 0).map((line) => line.ref);
    expect(due).toEqual(['MF-0178']);
  });
});

// The demo's table of commissions: state, and days since what brought it there.
describe('the fourteen commissions', () => {
  it.each([
    ['MF-0171', 'closed', 'T33', 40],
    ['MF-0174', 'rework', 'T33', 75],
    ['MF-0176', 'lost', 'T32', 16],
    ['MF-0177', 'lapsed', 'T9', 5],
    ['MF-0178', 'finished', 'T31', 23],
    ['MF-0179', 'making', 'T12', 64],
    ['MF-0180', 'cancelled', 'T41', 22],
    ['MF-0181', 'making', 'T16', 36],
    ['MF-0182', 'making', 'T15', 4],
    ['MF-0183', 'held', 'T35', 12],
    ['MF-0184', 'booked', 'T12', 14],
    ['MF-0185', 'quoted', 'T8', 23],
    ['MF-0186', 'asking', 'T2', 8],
    ['MF-0187', 'declined', 'T5', 2],
  ] as const)('%s is %s, %s %i days ago', async (ref, deal, code, days) => {
    expect((await row(ref)).deal).toBe(deal);
    expect(Object.values(await since(ref, code))).toContain(days);
  });

  it('are numbered as their table says, and the next enquiry is MF-0188', async () => {
    const refs = await services.db
      .select({ ref: commissions.ref })
      .from(commissions)
      .orderBy(asc(commissions.createdAt));
    expect(refs.map(({ ref }) => ref)).toEqual(
      [171, 174, 176, 177, 178, 179, 180, 181, 182, 183, 184, 185, 186, 187].map((n) => `MF-0${n}`),
    );
    const next = await services.db.execute<{ n: string }>(sql`select nextval('commission_ref') as n`);
    expect(Number(next.rows[0]!.n)).toBe(188);
  });

  // Agreed sums with tax, stage by stage, from the same table.
  it.each([
    ['MF-0171', [24_000, 26_520]],
    ['MF-0174', [20_400, 11_400, 55_680]],
    ['MF-0176', [23_400, 15_600, 56_880]],
    ['MF-0177', [47_400, 29_400, 115_920]],
    ['MF-0178', [15_000, 38_040]],
    ['MF-0179', [63_500, 10_000, 187_399]],
    ['MF-0180', [66_000, 54_600, 149_280]],
    ['MF-0181', [66_000, 54_600, 149_280]],
    ['MF-0182', [36_000, 39_240]],
    ['MF-0183', [56_400, 47_400, 126_360]],
    ['MF-0184', [25_200, 27_720]],
    ['MF-0185', [81_600, 39_000, 87_480]],
  ] as const)('%s is quoted in stages of %j', async (ref, stages) => {
    const { id } = await row(ref);
    const sent = await services.db
      .select()
      .from(quotes)
      .where(eq(quotes.commissionId, id))
      .orderBy(asc(quotes.revision));
    expect(bodyOf(sent.at(-1)!).priced.stages.map((stage) => stage.grossMinor)).toEqual(stages);
  });

  it('were reckoned by the model, none with a price of the owner’s own', async () => {
    const sent = await services.db.select().from(quotes);
    expect(sent.map((quote) => bodyOf(quote).draft.price.kind).filter((kind) => kind !== 'firm')).toEqual([]);
  });

  it('MF-0180 paid 660.00, got 60.72 back and leaves 599.28', async () => {
    const { id } = await row('MF-0180');
    const moved = await services.db.select().from(ledgerEntries).where(eq(ledgerEntries.commissionId, id));
    expect(moved.map((entry) => [entry.kind, entry.amountMinor])).toEqual([
      ['received', 66_000],
      ['refund', -6_072],
    ]);
    expect(money.lines.find((line) => line.ref === 'MF-0180')?.balance.receivedMinor).toBe(59_928);
  });

  it('MF-0174 paid 874.80 and 133.20 for its refinishing', () => {
    const { balance } = money.lines.find((line) => line.ref === 'MF-0174')!;
    expect([balance.receivedMinor, balance.toComeMinor]).toEqual([87_480 + 13_320, 0]);
  });

  it('MF-0179 poured seven, six sound, and has fettled four of six', async () => {
    const { id } = await row('MF-0179');
    const poured = await services.db.select().from(attempts).where(eq(attempts.commissionId, id));
    expect(poured.filter((attempt) => attempt.pouredAt).length).toBe(7);
    expect(poured.map((attempt) => attempt.result).sort()).toEqual([
      ...Array<string>(1).fill('scrapped'),
      ...Array<string>(6).fill('sound'),
    ]);
    const all = await services.db.select().from(pieces).where(eq(pieces.commissionId, id));
    expect(all.map((piece) => piece.stage).sort()).toEqual([
      'fettled',
      'fettled',
      'fettled',
      'fettled',
      'sound',
      'sound',
    ]);
  });

  it('MF-0185 has one revision withdrawn and one that lapses in six days', async () => {
    const { id } = await row('MF-0185');
    const sent = await services.db
      .select()
      .from(quotes)
      .where(eq(quotes.commissionId, id))
      .orderBy(asc(quotes.revision));
    expect(sent.map((quote) => quote.state)).toEqual(['withdrawn', 'sent']);
    expect(daysBetween(NOW, sent[1]!.validUntil)).toBe(6);
  });

  it('MF-0182 waits at gate A with at least four pictures', async () => {
    const { id } = await row('MF-0182');
    const [gate] = await services.db.select().from(gates).where(eq(gates.commissionId, id));
    expect([gate!.state, gate!.photoIds.length, daysBetween(gate!.openedAt, NOW)]).toEqual(['open', 4, 4]);
  });

  it('MF-0186 is asked three questions about a file of 3.3 units', async () => {
    const { id } = await row('MF-0186');
    const asked = await services.db.select().from(questions).where(eq(questions.commissionId, id));
    expect(asked.map((question) => question.answer)).toEqual([null, null, null]);
    const [file] = await services.db.select().from(uploads).where(eq(uploads.commissionId, id));
    expect(file!.measure?.closed).toBe(true);
    // 85 mm long in inches of 25.4 mm (exact by definition since 1959).
    expect(Math.max(...file!.measure!.boxMm)).toBeCloseTo(85 / 25.4, 2);
  });
});

describe('the sword whose pour failed', () => {
  // A worked example reckoned apart from this code, in exact fractions and by simulation: 20.02 % and 7.90 %.
  it('expects 7.90 % where it expected 20.02 %', async () => {
    const { id } = await row('MF-0181');
    const [quote] = await services.db.select().from(quotes).where(eq(quotes.commissionId, id));
    const { draft, priced } = bodyOf(quote!);
    const poured = await services.db.select().from(attempts).where(eq(attempts.commissionId, id));
    expect(poured.map((attempt) => [attempt.result, attempt.cause])).toEqual([['scrapped', 'misrun']]);
    const belief = afterPour(draft.soundness, 'scrapped');
    expect([draft.soundness.alpha, draft.soundness.beta, belief.alpha, belief.beta]).toEqual([17, 7, 17, 8]);
    const progress = { poured: 1, scrapped: 1, sound: 0 };
    const toFinish = costToFinish(priced.sums, progress, belief, draft.hand, draft.pricing.handWeights);
    expect((priced.expectedMargin * 100).toFixed(2)).toBe('20.02');
    const now = expectedMargin(priced.workMinor, committedMinor(priced.sums, progress), toFinish);
    expect((now * 100).toFixed(2)).toBe('7.90');
  });

  it('tells an owner so, with 259.01 received beyond what is committed, and nobody else', async () => {
    const actor = async (role: 'owner' | 'bookkeeper' | 'maker') => {
      const [person] = await services.db.select().from(users).where(eq(users.role, role));
      return { id: person!.id, role, email: person!.email, name: person!.name };
    };
    const all = await readMargins(services, await actor('owner'));
    if (!all.ok) throw new Error(all.problem.message);
    const sword = all.value.get('MF-0181')!;
    expect([sword.quoted, sword.now].map((share) => (share * 100).toFixed(2))).toEqual(['20.02', '7.90']);
    expect(sword).toMatchObject({ committedMinor: 74_599, receivedNetMinor: 100_500, exposureMinor: 25_901 });
    expect(sword.beforeFettling).toBe(true);
    // Nothing that has not been poured has moved, and what is over is not in the list.
    expect(all.value.get('MF-0184')!.now).toBeCloseTo(all.value.get('MF-0184')!.quoted, 12);
    expect(['MF-0171', 'MF-0177', 'MF-0180', 'MF-0185'].filter((ref) => all.value.has(ref))).toEqual([]);
    for (const role of ['bookkeeper', 'maker'] as const)
      expect(await readMargins(services, await actor(role))).toMatchObject({ problem: { code: 'not-allowed' } });
  });
});

describe('papers and mails', () => {
  it('keep every quote under its own hash and under today’s terms', async () => {
    const sent = await services.db.select().from(quotes);
    expect(sent.length).toBe(13);
    expect(sent.filter((quote) => !isIntact(quote))).toEqual([]);
    expect(new Set(sent.map((quote) => bodyOf(quote).terms.sha256))).toEqual(new Set([termsSha256(CURRENT_TERMS)]));
  });

  it('number receipts without a gap in the order they were paid', async () => {
    const received = await services.db
      .select()
      .from(ledgerEntries)
      .where(eq(ledgerEntries.kind, 'received'))
      .orderBy(asc(ledgerEntries.at));
    expect(received.map((entry) => entry.receiptNo)).toEqual(received.map((_, index) => index + 1));
  });

  it('leave no mail waiting and no job behind', async () => {
    expect(await services.db.select().from(mails).where(ne(mails.state, 'delivered'))).toEqual([]);
    const jobs = await services.db.execute<{ n: string }>(sql`select count(*) as n from graphile_worker.jobs`);
    expect(Number(jobs.rows[0]!.n)).toBe(0);
    const [unwritten] = await services.db
      .select({ n: count() })
      .from(mails)
      .where(sql`${mails.html} is null or ${mails.subject} is null`);
    expect(unwritten!.n).toBe(0);
  });

  it('hold photos that all differ, each told in words, in files that are there', async () => {
    const all = await services.db.select().from(photos);
    expect(new Set(all.map((photo) => photo.sha256)).size).toBe(all.length);
    expect(all.filter((photo) => photo.alt.length < 20)).toEqual([]);
    const keys = all.flatMap((photo) => Object.values(photo.files).map((file) => file.key));
    expect(keys.filter((key) => !existsSync(pathOf(services.config.uploadsFolder, key)))).toEqual([]);
  });
});

describe('the rates in force after the seed', () => {
  it('are the ones the price list is held by, with no pour of the stories counted twice', async () => {
    const card = await currentRateCard(services);
    expect(card.rates).toEqual(demoRates);
    expect(card.forms).toHaveLength(14);
  });
});

describe('the seed', () => {
  it('refuses a database that holds people and changes nothing', async () => {
    const before = await services.db.select({ n: count() }).from(events);
    await expect(seedDemo(services)).rejects.toThrow('empty database');
    expect(await services.db.select({ n: count() }).from(events)).toEqual(before);
  });
});
