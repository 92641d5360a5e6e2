// Delayed payment methods as in Stripe's documentation of Checkout: completed but unpaid, then async_payment_succeeded or
// _failed. Reliability plan row 7.
import fc from 'fast-check';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { reconcileSession } from '../../../src/server/money/payments';
import { commission, letters } from '../deal/deal-setting';
import {
  agreed,
  balance,
  bank,
  countOf,
  deliverAll,
  dueStage,
  historyOf,
  ledgerOf,
  openPage,
  openPayingStudio,
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

describe('a delayed payment', () => {
  async function debited() {
    const ref = await agreed(studio);
    const page = await openPage(studio, ref);
    await payAt(studio, page.url, 'debit');
    return { ref, page };
  }

  it('is on its way until the bank has sent it, and only then booked', async () => {
    const { ref, page } = await debited();
    await deliverAll(studio);
    expect((await balance(studio, ref)).stages[0]).toMatchObject({ state: 'on-its-way', paidMinor: 0 });
    expect((await commission(studio, ref)).deal).toBe('agreed');
    expect(countOf(await letters(studio, ref), 'M12')).toBe(0);
    await bank(studio, 'settle', page.sessionId);
    await deliverAll(studio);
    expect((await balance(studio, ref)).stages[0]).toMatchObject({ state: 'paid' });
    expect((await commission(studio, ref)).deal).toBe('booked');
    expect(countOf(await historyOf(studio, ref), 'payment-pending')).toBe(1);
  });

  it('that fails leaves the stage due, says so once, and can be paid again', async () => {
    const { ref, page } = await debited();
    await deliverAll(studio);
    await bank(studio, 'fail', page.sessionId);
    const events = takeSessionEvents(studio);
    for (const event of [...events, ...events]) await post(studio, event);
    expect(await ledgerOf(studio, ref)).toEqual([]);
    expect(countOf(await historyOf(studio, ref), 'payment-failed')).toBe(1);
    expect((await dueStage(studio, ref)).state).toBe('due');
    await payDue(studio, ref);
    expect((await commission(studio, ref)).deal).toBe('booked');
  });

  it('ends the same in any order of its events, each any number of times, with the bank’s answer anywhere between', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.boolean(),
        fc.array(fc.nat(1), { minLength: 2, maxLength: 6 }),
        fc.boolean(),
        async (arrives, order, parallel) => {
          const { ref, page } = await debited();
          const [completed] = takeSessionEvents(studio);
          if (order[0] === 0) await post(studio, completed!);
          await bank(studio, arrives ? 'settle' : 'fail', page.sessionId);
          const [ended] = takeSessionEvents(studio);
          const schedule = [...order, 0, 1].map((place) => [completed!, ended!][place]!);
          if (parallel) await Promise.all(schedule.map((parcel) => post(studio, parcel)));
          else for (const parcel of schedule) await post(studio, parcel);
          expect(await ledgerOf(studio, ref)).toHaveLength(arrives ? 1 : 0);
          expect(await sessionsOf(studio, ref)).toMatchObject([{ state: arrives ? 'paid' : 'failed' }]);
          expect(countOf(await letters(studio, ref), 'M12')).toBe(arrives ? 1 : 0);
          expect((await commission(studio, ref)).deal).toBe(arrives ? 'booked' : 'agreed');
          expect(await trayOf(studio, ref)).toEqual([]);
        },
      ),
      { numRuns: 25 },
    );
  }, 120_000);

  it('is not set back by a webhook that was looked up before the bank answered', async () => {
    const { ref, page } = await debited();
    const before = await studio.services.stripe.checkout.sessions.retrieve(page.sessionId, {
      expand: ['payment_intent'],
    });
    await bank(studio, 'fail', page.sessionId);
    await deliverAll(studio);
    const stale = {
      ...studio.services,
      stripe: { checkout: { sessions: { retrieve: async () => before } } } as unknown as typeof studio.services.stripe,
    };
    await reconcileSession(stale, page.sessionId);
    expect(await sessionsOf(studio, ref)).toMatchObject([{ state: 'failed' }]);
    expect((await dueStage(studio, ref)).state).toBe('due');
  });
});
