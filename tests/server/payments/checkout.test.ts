// Judge: the official Stripe SDK (23.1.0) against the fake; OWASP WSTG-BUSL-07/-10 for the tamperings.
import { eq } from 'drizzle-orm';
import Stripe from 'stripe';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { paySchema, startCheckout } from '../../../src/server/money/checkout';
import { createOnce } from '../../../src/server/stripe/provider';
import { commissions } from '../../../src/server/db/schema/commissions';
import { codeOf, commission, newEnquiry, sentQuote } from '../deal/deal-setting';
import {
  agreed,
  balance,
  bank,
  deliverAll,
  dueStage,
  ledgerOf,
  openPage,
  openPayingStudio,
  payAt,
  payDue,
  sessionsOf,
  type PayingStudio,
} from '../../factories/paying-studio';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

const MINUTE = 60_000;
const sessionsAtStripe = async (ref: string) =>
  (await studio.services.stripe.checkout.sessions.list({ limit: 100 })).data.filter(
    (session) => session.client_reference_id === ref,
  );

describe('the payment page', () => {
  it('asks for exactly what is owed, in the currency agreed, and leads back to the commission', async () => {
    const ref = await agreed(studio);
    const stage = await dueStage(studio, ref);
    const page = await openPage(studio, ref);
    const session = await studio.services.stripe.checkout.sessions.retrieve(page.sessionId);
    expect(page.amountMinor).toBe(stage.grossMinor);
    expect(session).toMatchObject({
      amount_total: stage.grossMinor,
      currency: 'gbp',
      client_reference_id: ref,
      customer_email: 'isolde@example.org',
      metadata: { ref, stage: stage.id },
    });
    expect(session.success_url).toBe(
      `${studio.services.config.publicUrl}/commissions/${ref}/pay/return?session={CHECKOUT_SESSION_ID}`,
    );
    expect(await ledgerOf(studio, ref)).toEqual([]);
    expect((await commission(studio, ref)).deal).toBe('agreed');
  });

  it('is the same at the second click', async () => {
    const ref = await agreed(studio);
    const first = await openPage(studio, ref);
    expect(await openPage(studio, ref)).toEqual(first);
    expect(await sessionsAtStripe(ref)).toHaveLength(1);
  });

  it('is one, however many click at once', async () => {
    for (let round = 0; round < 3; round += 1) {
      const ref = await agreed(studio);
      const pages = await Promise.all(Array.from({ length: 20 }, () => openPage(studio, ref)));
      expect(new Set(pages.map((page) => page.sessionId)).size).toBe(1);
      expect(await sessionsAtStripe(ref)).toHaveLength(1);
      expect(await sessionsOf(studio, ref)).toHaveLength(1);
    }
  });

  it('is the one already made when our own row of it was lost', async () => {
    const ref = await agreed(studio);
    studio.fake.faults.set({ dropAnswers: 3, path: '/v1/checkout/sessions' });
    const stage = await dueStage(studio, ref);
    const lost = await startCheckout(studio.services, studio.customer, ref, { stage: stage.id });
    expect(codeOf(lost)).toBe('unavailable');
    expect(await sessionsOf(studio, ref)).toEqual([]);
    const page = await openPage(studio, ref);
    expect(await sessionsAtStripe(ref)).toMatchObject([{ id: page.sessionId }]);
  });

  it('that nears its end is ended and replaced, so that no stage has two', async () => {
    const ref = await agreed(studio);
    const first = await openPage(studio, ref);
    const [row] = await sessionsOf(studio, ref);
    const start = studio.clock.now;
    studio.clock.now = new Date(row!.expiresAt.getTime() - 2 * MINUTE);
    const pages = await Promise.all(Array.from({ length: 10 }, () => openPage(studio, ref)));
    studio.clock.now = start;
    expect(new Set(pages.map((page) => page.sessionId)).size).toBe(1);
    expect(pages[0]!.sessionId).not.toBe(first.sessionId);
    const states = await sessionsAtStripe(ref);
    expect(states.map((session) => [session.id, session.status]).sort()).toEqual(
      [
        [first.sessionId, 'expired'],
        [pages[0]!.sessionId, 'open'],
      ].sort(),
    );
  });

  it('nearing its end that was paid unseen is booked instead of replaced', async () => {
    const ref = await agreed(studio);
    const page = await openPage(studio, ref);
    const [row] = await sessionsOf(studio, ref);
    const stage = await dueStage(studio, ref);
    const start = studio.clock.now;
    studio.clock.now = new Date(row!.expiresAt.getTime() - 2 * MINUTE);
    await payAt(studio, page.url);
    studio.parcels.splice(0);
    const again = await startCheckout(studio.services, studio.customer, ref, { stage: stage.id });
    studio.clock.now = start;
    expect(again).toMatchObject({ ok: false, problem: { code: 'conflict', message: expect.stringContaining('just') } });
    expect(await ledgerOf(studio, ref)).toMatchObject([{ amountMinor: stage.grossMinor, stagePaymentId: stage.id }]);
  });

  it('is not made while Stripe is away, which is said in a sentence', async () => {
    const ref = await agreed(studio);
    const stage = await dueStage(studio, ref);
    studio.fake.faults.set({ errors: { times: 3, status: 500 }, dropAnswers: 0, path: '/v1/checkout/sessions' });
    const refused = await startCheckout(studio.services, studio.customer, ref, { stage: stage.id });
    studio.fake.faults.set({ errors: { times: 0 } });
    expect(refused).toMatchObject({
      ok: false,
      problem: { code: 'unavailable', message: expect.stringContaining('nothing was taken') },
    });
    expect((await openPage(studio, ref)).amountMinor).toBe(stage.grossMinor);
  });
});

describe('a failure that Stripe remembers under its key', () => {
  const broken = (replayed: boolean) =>
    new Stripe.errors.StripeAPIError({
      message: 'broken',
      type: 'api_error',
      headers: replayed ? { 'idempotent-replayed': 'true' } : {},
    });

  it('is gone past by the next key, and a fresh failure is not', async () => {
    const keys: string[] = [];
    const made = await createOnce('checkout:a', async (key) => {
      keys.push(key);
      if (keys.length < 3) throw broken(true);
      return 'a page';
    });
    expect([made, keys]).toEqual(['a page', ['checkout:a', 'checkout:a:again-2', 'checkout:a:again-3']]);
    await expect(createOnce('checkout:b', () => Promise.reject(broken(false)))).rejects.toThrow('broken');
    await expect(createOnce('checkout:c', () => Promise.reject(broken(true)))).rejects.toThrow('broken');
  });
});

describe('what cannot be paid', () => {
  const pay = (ref: string, stage: string, actor = studio.customer as typeof studio.customer | null) =>
    startCheckout(studio.services, actor, ref, { stage });

  it('a stage that is paid, on its way, or not due yet', async () => {
    const ref = await agreed(studio);
    const [first, later] = (await balance(studio, ref)).stages;
    expect(await pay(ref, later!.id)).toMatchObject({
      problem: { code: 'conflict', message: expect.stringContaining('not due yet') },
    });
    await payDue(studio, ref);
    expect(await pay(ref, first!.id)).toMatchObject({
      problem: { code: 'conflict', message: expect.stringContaining('paid already') },
    });
    const other = await agreed(studio);
    const page = await openPage(studio, other);
    await payAt(studio, page.url, 'debit');
    await deliverAll(studio);
    expect(await pay(other, (await balance(studio, other)).stages[0]!.id)).toMatchObject({
      problem: { code: 'conflict', message: expect.stringContaining('on its way') },
    });
    await bank(studio, 'settle', page.sessionId);
    await deliverAll(studio);
  });

  it('the commission of somebody else, or any without being its customer', async () => {
    const ref = await agreed(studio);
    const { id } = await dueStage(studio, ref);
    expect(codeOf(await pay(ref, id, studio.other))).toBe('not-found');
    expect(codeOf(await pay(ref, id, studio.maker))).toBe('not-allowed');
    expect(codeOf(await pay(ref, id, studio.bookkeeper))).toBe('not-allowed');
    expect(codeOf(await pay(ref, id, null))).toBe('sign-in-needed');
    expect(await sessionsAtStripe(ref)).toEqual([]);
  });

  it('a stage of another commission under one’s own', async () => {
    const [mine, another] = [await agreed(studio), await agreed(studio)];
    const { id } = await dueStage(studio, another);
    expect(codeOf(await pay(mine, id))).toBe('not-found');
    expect(await sessionsAtStripe(mine)).toEqual([]);
  });

  it('a quote that nobody accepted, a stage nobody agreed, or what is no id at all', async () => {
    const ref = await newEnquiry(studio);
    await sentQuote(studio, ref);
    expect(codeOf(await pay(ref, '0190c0de-0000-7000-8000-000000000000'))).toBe('not-found');
    for (const stage of ['', '1', "' or 1=1", 'x'.repeat(500), -1, null, {}]) {
      expect(paySchema.safeParse({ stage }).success, JSON.stringify(stage)).toBe(false);
    }
    // What else is sent along has no say: the amount is reckoned here.
    const stage = '0190c0de-0000-7000-8000-000000000000';
    expect(paySchema.parse({ stage, amount: 1, currency: 'usd' })).toEqual({ stage });
  });

  it.each(['lapsed', 'cancelled'] as const)('a commission that is %s', async (deal) => {
    const ref = await agreed(studio);
    const { id } = await dueStage(studio, ref);
    await studio.services.db.update(commissions).set({ deal }).where(eq(commissions.ref, ref));
    expect(await pay(ref, id)).toMatchObject({ problem: { code: 'conflict', message: expect.stringContaining(deal) } });
    expect(await sessionsAtStripe(ref)).toEqual([]);
  });
});
