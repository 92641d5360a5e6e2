// The specification, capability 6: wrong amount goes to the owner's tray; a withdrawn revision is never paid. Reliability plan row 5.
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { commissions, tray } from '../../../src/server/db/schema/commissions';
import { checkoutSessions, stagePayments, quotes } from '../../../src/server/db/schema/quotes';
import { reconcileSession } from '../../../src/server/money/payments';
import { withdrawQuote } from '../../../src/server/quote/quotes';
import { codeOf, commission, letters, newEnquiry, sentQuote } from '../deal/deal-setting';
import {
  agreed,
  balance,
  countOf,
  dueStage,
  ledgerOf,
  openPayingStudio,
  paidUnseen,
  payAt,
  payDue,
  post,
  sessionsOf,
  takeSessionEvents,
  trayOf,
  type PayingStudio,
} from '../../factories/paying-studio';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

describe('money that does not fit', () => {
  async function sessionFor(ref: string, change: { amount?: number; currency?: string; stage?: string }) {
    const { id } = await commission(studio, ref);
    const stage = (await balance(studio, ref)).stages[0]!;
    const metadata = { commission: id, ref, stage: change.stage ?? stage.id };
    const session = await studio.services.stripe.checkout.sessions.create({
      mode: 'payment',
      customer_email: 'isolde@example.org',
      success_url: 'http://localhost/paid',
      line_items: [
        {
          quantity: 1,
          price_data: {
            currency: change.currency ?? 'gbp',
            unit_amount: change.amount ?? stage.grossMinor,
            product_data: { name: 'A payment of another shape' },
          },
        },
      ],
      metadata,
    });
    await payAt(studio, session.url!);
    return takeSessionEvents(studio)[0]!;
  }

  it.each([
    ['a penny short', { short: 1 }],
    ['a penny over', { short: -1 }],
    ['of another currency', { currency: 'eur' }],
    ['for a stage the commission does not have', { stage: '0190c0de-0000-7000-8000-00000000beef' }],
  ])(
    '%s goes to the tray and is never guessed at',
    async (_what, { short, ...change }: { short?: number; currency?: string; stage?: string }) => {
      const ref = await agreed(studio);
      const owed = (await dueStage(studio, ref)).owedMinor;
      const event = await sessionFor(ref, { ...change, ...(short === undefined ? {} : { amount: owed - short }) });
      const answers = await Promise.all(Array.from({ length: 5 }, () => post(studio, event)));
      expect(answers.filter(({ body }) => body.outcome === 'unmatched')).toHaveLength(1);
      expect(await ledgerOf(studio, ref)).toMatchObject([{ stagePaymentId: null, receiptNo: expect.any(Number) }]);
      expect(await trayOf(studio, ref)).toMatchObject([{ settledAt: null, problem: { message: expect.any(String) } }]);
      expect((await commission(studio, ref)).deal).toBe('agreed');
      expect(countOf(await letters(studio, ref), 'M12')).toBe(0);
      const after = await balance(studio, ref);
      expect(after.stages[0]!.state).toBe('due');
      expect(change.currency ? after.foreign : after.unmatchedMinor).toEqual(
        change.currency ? [{ currency: 'EUR', minor: owed }] : owed - (short ?? 0),
      );
    },
  );

  it('a second payment of the same stage from a page left open goes to the tray, the first stays booked', async () => {
    const ref = await agreed(studio);
    const second = await sessionFor(ref, {});
    await payDue(studio, ref);
    expect((await post(studio, second)).body.outcome).toBe('unmatched');
    expect(await trayOf(studio, ref)).toHaveLength(1);
    expect((await balance(studio, ref)).stages[0]).toMatchObject({ state: 'paid' });
    expect(countOf(await letters(studio, ref), 'M12')).toBe(1);
  });

  it('a page of a revision that was withdrawn, paid all the same, is never booked on its stage', async () => {
    const { services, owner } = studio;
    const ref = await newEnquiry(studio);
    await sentQuote(studio, ref);
    const { id } = await commission(studio, ref);
    const { stageId, sessionId, url } = await openPageOnQuote(ref, id);
    expect(codeOf(await withdrawQuote(services, owner, ref, 1, {}))).toBe('ok');
    expect(await sessionsOf(studio, ref)).toMatchObject([{ id: sessionId, state: 'expired' }]);
    await payAt(studio, url);
    const [event] = takeSessionEvents(studio);
    expect((await post(studio, event!)).body.outcome).toBe('unmatched');
    expect(await ledgerOf(studio, ref)).toMatchObject([{ stagePaymentId: null }]);
    const [item] = await trayOf(studio, ref);
    expect(item).toMatchObject({
      problem: { message: expect.stringContaining('revision 1') },
      data: { stage: stageId },
    });
    expect((await commission(studio, ref)).deal).toBe('quoted');
  });

  it('a commission that lapsed meanwhile: the money is laid before the owner and the commission stays lapsed', async () => {
    const { ref, completed } = await paidUnseen(studio);
    await studio.services.db.update(commissions).set({ deal: 'lapsed' }).where(eq(commissions.ref, ref));
    expect((await post(studio, completed)).body.outcome).toBe('unmatched');
    expect((await commission(studio, ref)).deal).toBe('lapsed');
    expect(await trayOf(studio, ref)).toMatchObject([{ problem: { message: expect.stringContaining('lapsed') } }]);
  });

  it('a page that names no commission of ours is laid before the owner once, when it was paid', async () => {
    const session = await studio.services.stripe.checkout.sessions.create({
      mode: 'payment',
      customer_email: 'stranger@example.org',
      success_url: 'http://localhost/paid',
      line_items: [
        { quantity: 1, price_data: { currency: 'gbp', unit_amount: 5_000, product_data: { name: 'Something else' } } },
      ],
      metadata: { commission: 'not an id', stage: "'; drop table tray" },
    });
    await payAt(studio, session.url!);
    const [event] = takeSessionEvents(studio);
    await Promise.all([
      ...Array.from({ length: 5 }, () => post(studio, event!)),
      reconcileSession(studio.services, session.id),
    ]);
    const items = await studio.services.db.select().from(tray);
    const mine = items.filter(({ data }) => (data as { session?: string }).session === session.id);
    expect(mine).toMatchObject([{ commissionId: null, data: { amountMinor: 5_000, currency: 'GBP' } }]);
  });

  async function openPageOnQuote(ref: string, commissionId: string) {
    const { services } = studio;
    const [quote] = await services.db.select().from(quotes).where(eq(quotes.commissionId, commissionId));
    const stageId = '0190c0de-0000-7000-8000-00000000000a';
    await services.db.insert(stagePayments).values({
      id: stageId,
      commissionId,
      quoteId: quote!.id,
      position: 1,
      label: 'Deposit',
      trigger: 'acceptance',
      currency: 'GBP',
      netMinor: 10_000,
      taxMinor: 2_000,
      grossMinor: 12_000,
    });
    const session = await services.stripe.checkout.sessions.create({
      mode: 'payment',
      customer_email: 'isolde@example.org',
      success_url: 'http://localhost/paid',
      line_items: [
        { quantity: 1, price_data: { currency: 'gbp', unit_amount: 12_000, product_data: { name: `${ref} deposit` } } },
      ],
      metadata: { commission: commissionId, stage: stageId },
    });
    await services.db.insert(checkoutSessions).values({
      id: session.id,
      commissionId,
      stagePaymentId: stageId,
      quoteId: quote!.id,
      amountMinor: 12_000,
      currency: 'GBP',
      url: session.url!,
      createdAt: services.now(),
      expiresAt: new Date(session.expires_at * 1000),
    });
    return { stageId, sessionId: session.id, url: session.url! };
  }
});
