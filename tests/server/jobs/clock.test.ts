import { eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { commissions, events } from '../../../src/server/db/schema/commissions';
import { users } from '../../../src/server/db/schema/people';
import { acceptances, checkoutSessions, quotes, stagePayments } from '../../../src/server/db/schema/quotes';
import { mails } from '../../../src/server/db/schema/studio';
import { lapseDeposits, lapseQuotes, requeueMails } from '../../../src/server/jobs/clock';
import { openPostOffice, type PostOffice } from '../mail/post-office';
import { addCommission, jobs, queueReceipt } from '../mail/rows';

let office: PostOffice;
beforeEach(async () => {
  office = await openPostOffice();
  office.setNow(START);
});
afterEach(() => office.close());

const START = new Date('2027-01-04T10:00:00Z');
const DAY_MS = 86_400_000;
const day = (days: number) => new Date(START.getTime() + days * DAY_MS);

async function quoted(deal: 'quoted' | 'agreed') {
  const commission = await addCommission(office.services, { deal });
  const { db } = office.services;
  const [quote] = await db
    .insert(quotes)
    .values({
      id: uuidv7(),
      commissionId: commission.id,
      revision: 1,
      state: deal === 'agreed' ? 'accepted' : 'sent',
      body: {},
      sha256: 'a'.repeat(64),
      termsVersion: '2026-1',
      validUntil: day(30),
      sentAt: START,
    })
    .returning();
  const [stage] = await db
    .insert(stagePayments)
    .values({
      id: uuidv7(),
      commissionId: commission.id,
      quoteId: quote!.id,
      position: 1,
      label: 'First payment',
      trigger: 'acceptance',
      currency: 'GBP',
      netMinor: 55_000,
      taxMinor: 11_000,
      grossMinor: 66_000,
      dueAt: START,
    })
    .returning();
  return { commission, quote: quote!, stage: stage! };
}

async function agreed() {
  const made = await quoted('agreed');
  const { db } = office.services;
  const [user] = await db.insert(users).values({ email: 'isolde@example.org', name: 'Isolde Wintermere' }).returning();
  await db.insert(acceptances).values({
    quoteId: made.quote.id,
    commissionId: made.commission.id,
    quoteSha256: made.quote.sha256,
    termsVersion: '2026-1',
    termsSha256: 'b'.repeat(64),
    typedName: 'Isolde Wintermere',
    acceptedBy: user!.id,
    address: '127.0.0.1',
    declarations: {},
    acceptedAt: START,
  });
  return made;
}

async function payLater({ commission, quote, stage }: Awaited<ReturnType<typeof quoted>>) {
  await office.services.db.insert(checkoutSessions).values({
    id: 'cs_test_pending',
    commissionId: commission.id,
    stagePaymentId: stage.id,
    quoteId: quote.id,
    amountMinor: 66_000,
    currency: 'GBP',
    state: 'pending',
    url: 'http://127.0.0.1/pay',
    createdAt: START,
    expiresAt: day(1),
  });
}

const dealOf = async (id: string) =>
  (await office.services.db.select({ deal: commissions.deal }).from(commissions).where(eq(commissions.id, id)))[0]
    ?.deal;
const letters = async () => (await office.services.db.select().from(mails)).map((mail) => mail.letter);

describe('quotes', () => {
  test('lapse once when their validity has passed, with a line of history', async () => {
    const { commission, quote } = await quoted('quoted');
    expect(await lapseQuotes(office.services)).toBe(0);
    office.setNow(day(31));
    const counts = await Promise.all([lapseQuotes(office.services), lapseQuotes(office.services)]);
    expect(counts.toSorted()).toEqual([0, 1]);
    expect(await dealOf(commission.id)).toBe('lapsed');
    const [row] = await office.services.db.select().from(quotes).where(eq(quotes.id, quote.id));
    expect(row).toMatchObject({ state: 'lapsed', closedAt: day(31) });
    const history = await office.services.db.select().from(events);
    expect(history).toMatchObject([{ code: 'T9', actorRole: 'clock', from: 'quoted', to: 'lapsed', public: true }]);
  });

  test('stand while a payment is on its way', async () => {
    const made = await quoted('quoted');
    await payLater(made);
    office.setNow(day(31));
    expect(await lapseQuotes(office.services)).toBe(0);
    expect(await dealOf(made.commission.id)).toBe('quoted');
  });
});

describe('first payments', () => {
  test('are reminded of once after four days and given up after seven', async () => {
    const { commission } = await agreed();
    office.setNow(day(3.9));
    await lapseDeposits(office.services);
    expect(await letters()).toEqual([]);
    office.setNow(day(4));
    await lapseDeposits(office.services);
    await lapseDeposits(office.services);
    expect(await letters()).toEqual(['M13']);
    const [reminder] = await office.services.db.select().from(mails);
    expect(reminder?.data).toMatchObject({ amount: { minor: 66_000, currency: 'GBP' }, heldUntil: '2027-01-11' });
    office.setNow(day(7));
    await lapseDeposits(office.services);
    expect(await dealOf(commission.id)).toBe('lapsed');
  });

  test('are left alone while one is on its way', async () => {
    const made = await agreed();
    await payLater(made);
    office.setNow(day(20));
    await lapseDeposits(office.services);
    expect(await letters()).toEqual([]);
    expect(await dealOf(made.commission.id)).toBe('agreed');
  });
});

describe('waiting mails', () => {
  test('that lost their job get one again; the others keep theirs', async () => {
    const id = await queueReceipt(office.services);
    expect(await requeueMails(office.services)).toBe(0);
    await office.services.pool.query('delete from graphile_worker._private_jobs');
    expect(await requeueMails(office.services)).toBe(1);
    expect(await jobs(office.services)).toMatchObject([{ task: 'send-mail', key: `mail:${id}` }]);
  });
});
