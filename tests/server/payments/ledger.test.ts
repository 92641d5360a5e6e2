// The specification, capability 19: gapless numbers under 50 parallel payments; section 2: the ledger is append-only.
import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ledgerEntries, stagePayments } from '../../../src/server/db/schema/quotes';
import { acceptedStages, bookEntry } from '../../../src/server/money/ledger';
import { readMoney } from '../../../src/server/money/money-view';
import { readReceipt } from '../../../src/server/money/receipt';
import { codeOf, commission } from '../deal/deal-setting';
import {
  agreed,
  balance,
  dueStage,
  historyOf,
  ledgerOf,
  openPage,
  openPayingStudio,
  paidUnseen,
  payAt,
  payDue,
  post,
  takeSessionEvents,
  trayOf,
  type PayingStudio,
} from '../../factories/paying-studio';
import { readTray, settleTrayItem } from '../../../src/server/tray';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

const causeOf = async (work: PromiseLike<unknown>) =>
  work.then(
    () => 'done',
    (error: Error & { cause?: Error }) => error.cause?.message ?? error.message,
  );

describe('receipts', () => {
  it('have no gap and no double under fifty payments at once, some of which are rolled back or sent twice', async () => {
    const { services } = studio;
    const refs: string[] = [];
    for (let each = 0; each < 10; each += 1) refs.push(await agreed(studio));
    const stages = await Promise.all(refs.map((ref) => dueStage(studio, ref)));
    const book = (place: number, fails: boolean) =>
      services.db.transaction(async (tx) => {
        const { id } = await commission(studio, refs[place % refs.length]!);
        await bookEntry(tx, {
          commissionId: id,
          stagePaymentId: stages[place % refs.length]!.id,
          kind: 'received',
          amountMinor: 100 + place,
          currency: 'GBP',
          // Every tenth is the same money as the one before it.
          providerId: `pi_parallel_${place % 10 === 9 ? place - 1 : place}`,
          cause: {},
          at: services.now(),
        });
        if (fails) throw new Error('rolled back');
      });
    const outcomes = await Promise.allSettled(Array.from({ length: 50 }, (_, place) => book(place, place % 7 === 3)));
    expect(outcomes.some((outcome) => outcome.status === 'rejected')).toBe(true);
    const rows = await services.db.select().from(ledgerEntries);
    const numbers = rows.map((row) => row.receiptNo).sort((a, b) => a! - b!);
    expect(numbers).toEqual(Array.from({ length: numbers.length }, (_, place) => place + 1));
    expect(new Set(rows.map((row) => row.providerId)).size).toBe(rows.length);
  });

  it('of fifty real payments whose webhooks come at once are consecutive and sum to what Stripe took', async () => {
    const { services } = studio;
    const refs: string[] = [];
    for (let each = 0; each < 50; each += 1) {
      const ref = await agreed(studio);
      await payAt(studio, (await openPage(studio, ref)).url);
      refs.push(ref);
    }
    const events = takeSessionEvents(studio);
    expect(events).toHaveLength(50);
    await Promise.all(events.map((event) => post(studio, event)));
    const entries = (await Promise.all(refs.map((ref) => ledgerOf(studio, ref)))).flat();
    const numbers = entries.map((entry) => entry.receiptNo!).sort((a, b) => a - b);
    expect(numbers).toEqual(Array.from({ length: 50 }, (_, place) => numbers[0]! + place));
    const charges = await services.stripe.charges.list({ limit: 100 });
    const taken = charges.data.reduce((sum, charge) => sum + charge.amount, 0);
    expect(entries.reduce((sum, entry) => sum + entry.amountMinor, 0)).toBe(taken);
  }, 120_000);

  it('are read by the payer, the owner and the bookkeeper, and by nobody else', async () => {
    const { services, customer, owner, bookkeeper, other, maker } = studio;
    const ref = await agreed(studio);
    const [stage] = await acceptedStages(services.db, (await commission(studio, ref)).id);
    await payDue(studio, ref);
    const [entry] = await ledgerOf(studio, ref);
    const number = entry!.receiptNo!;
    for (const actor of [customer, owner, bookkeeper]) {
      expect(await readReceipt(services, actor, ref, number)).toMatchObject({
        ok: true,
        value: {
          receiptNo: number,
          amountMinor: stage!.grossMinor,
          tax: { netMinor: stage!.netMinor, taxMinor: stage!.taxMinor },
          label: stage!.label,
        },
      });
    }
    expect(codeOf(await readReceipt(services, other, ref, number))).toBe('not-found');
    expect(codeOf(await readReceipt(services, maker, ref, number))).toBe('not-allowed');
    expect(codeOf(await readReceipt(services, null, ref, number))).toBe('sign-in-needed');
    expect(codeOf(await readReceipt(services, customer, ref, number + 1))).toBe('not-found');
    expect(codeOf(await readReceipt(services, customer, await agreed(studio), number))).toBe('not-found');
  });
});

describe('the ledger', () => {
  it('takes no change, no deletion and no emptying', async () => {
    const { db } = studio.services;
    const { completed, ref } = await paidUnseen(studio);
    await post(studio, completed);
    const [entry] = await ledgerOf(studio, ref);
    const mine = eq(ledgerEntries.id, entry!.id);
    expect(await causeOf(db.update(ledgerEntries).set({ amountMinor: 1 }).where(mine))).toContain('append-only');
    expect(await causeOf(db.delete(ledgerEntries).where(mine))).toContain('append-only');
    expect(await causeOf(db.execute(sql`truncate ledger_entries`))).toContain('append-only');
    expect(await ledgerOf(studio, ref)).toEqual([entry]);
  });

  it('takes no received money below zero and no refund above it', async () => {
    const { id } = await commission(studio, await agreed(studio));
    const book = (kind: 'received' | 'refund', amountMinor: number) =>
      studio.services.db.transaction((tx) =>
        bookEntry(tx, {
          commissionId: id,
          stagePaymentId: null,
          kind,
          amountMinor,
          currency: 'GBP',
          providerId: `${kind} ${amountMinor}`,
          cause: {},
          at: studio.services.now(),
        }),
      );
    expect(await causeOf(book('received', -1))).toContain('ledger_sign');
    expect(await causeOf(book('received', 0))).toContain('ledger_sign');
    expect(await causeOf(book('refund', 1))).toContain('ledger_sign');
  });

  it('keeps an agreed stage as it was agreed', async () => {
    const { db } = studio.services;
    const { id } = await dueStage(studio, await agreed(studio));
    const mine = eq(stagePayments.id, id);
    expect(await causeOf(db.update(stagePayments).set({ grossMinor: 1 }).where(mine))).toContain('does not change');
    expect(await causeOf(db.delete(stagePayments).where(mine))).toContain('does not change');
  });
});

describe('the money page', () => {
  it('shows sums of each currency to the owner and the bookkeeper only', async () => {
    const { services, owner, bookkeeper, customer, maker } = studio;
    const before = await readMoney(services, owner);
    const ref = await agreed(studio);
    await payDue(studio, ref);
    const after = await readMoney(services, bookkeeper);
    if (!before.ok || !after.ok) throw new Error('the money page was refused');
    const gbp = (page: typeof after) => page.value.totals.find((sum) => sum.currency === 'GBP')!;
    const { stages, agreedMinor } = await balance(studio, ref);
    expect(gbp(after).heldMinor - gbp(before).heldMinor).toBe(stages[0]!.grossMinor);
    expect(gbp(after).toComeMinor - gbp(before).toComeMinor).toBe(agreedMinor - stages[0]!.grossMinor);
    expect(after.value.moved[0]).toMatchObject({ ref, kind: 'received', label: stages[0]!.label });
    for (const actor of [customer, maker]) expect(codeOf(await readMoney(services, actor))).toBe('not-allowed');
    expect(codeOf(await readMoney(services, null))).toBe('sign-in-needed');
  });
});

describe('the tray', () => {
  it('is the owner’s, and settling an item twice settles it once', async () => {
    const { services, owner, bookkeeper, customer } = studio;
    const ref = await agreed(studio);
    const page = await openPage(studio, ref);
    const { id } = await commission(studio, ref);
    await payDue(studio, ref);
    const session = await services.stripe.checkout.sessions.create({
      mode: 'payment',
      customer_email: 'isolde@example.org',
      success_url: 'http://localhost/paid',
      line_items: [{ quantity: 1, price_data: { currency: 'gbp', unit_amount: 999, product_data: { name: 'Extra' } } }],
      metadata: { commission: id, stage: (await balance(studio, ref)).stages[0]!.id },
    });
    expect(session.id).not.toBe(page.sessionId);
    await payAt(studio, session.url!);
    for (const event of takeSessionEvents(studio)) await post(studio, event);
    const [item] = await trayOf(studio, ref);
    for (const actor of [bookkeeper, customer]) expect(codeOf(await readTray(services, actor))).toBe('not-allowed');
    expect(codeOf(await settleTrayItem(services, bookkeeper, item!.id))).toBe('not-allowed');
    const shown = await readTray(services, owner);
    expect(shown.ok && shown.value.some((each) => each.id === item!.id && each.ref === ref)).toBe(true);
    const pressed = await Promise.all(Array.from({ length: 5 }, () => settleTrayItem(services, owner, item!.id)));
    expect(pressed.filter((outcome) => outcome.ok && outcome.value.settled)).toHaveLength(1);
    expect((await historyOf(studio, ref)).filter((code) => code === 'tray-settled')).toHaveLength(1);
    expect(await trayOf(studio, ref)).toMatchObject([{ settledBy: owner.id }]);
    for (const wrong of ['', 'x', '-'.repeat(36)]) {
      expect(codeOf(await settleTrayItem(services, owner, wrong))).toBe('not-found');
    }
  });
});
