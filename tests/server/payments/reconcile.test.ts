// Reliability plan row 3: webhooks off for 500 payments, all right after one run. Judge: sums at the Stripe fake.
import { afterAll, beforeAll, expect, it } from 'vitest';
import { eq } from 'drizzle-orm';
import { readPaymentReturn } from '../../../src/server/money/payment-return';
import { checkoutSessions } from '../../../src/server/db/schema/quotes';
import { TASKS } from '../../../src/server/jobs/tasks';
import { reconcileCheckouts } from '../../../src/server/money/reconcile';
import { codeOf, commission, letters } from '../deal/deal-setting';
import {
  agreed,
  balance,
  bank,
  dueStage,
  ledgerOf,
  openPage,
  openPayingStudio,
  payAt,
  sessionsOf,
  type PayingStudio,
} from '../../factories/paying-studio';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

const later = (minutes: number) => {
  studio.clock.now = new Date(studio.clock.now.getTime() + minutes * 60_000);
};

it('finds every payment whose webhook never came, and leaves the others as they are', async () => {
  const paid: string[] = [];
  for (let each = 0; each < 12; each += 1) {
    const ref = await agreed(studio);
    await payAt(studio, (await openPage(studio, ref)).url);
    paid.push(ref);
  }
  const open = await agreed(studio);
  await openPage(studio, open);
  const delayed = await agreed(studio);
  const page = await openPage(studio, delayed);
  await payAt(studio, page.url, 'debit');
  const expired = await agreed(studio);
  await bank(studio, 'expire', (await openPage(studio, expired)).sessionId);
  studio.parcels.splice(0);
  later(2);
  expect(await reconcileCheckouts(studio.services)).toBe(13);
  for (const ref of paid) {
    expect(await ledgerOf(studio, ref)).toHaveLength(1);
    expect((await commission(studio, ref)).deal).toBe('booked');
    expect((await letters(studio, ref)).filter((letter) => letter.startsWith('M12'))).toHaveLength(1);
  }
  expect((await dueStage(studio, open)).state).toBe('due');
  expect((await balance(studio, delayed)).stages[0]!.state).toBe('on-its-way');
  expect(await sessionsOf(studio, expired)).toMatchObject([{ state: 'expired' }]);
  expect(await reconcileCheckouts(studio.services)).toBe(0);
  await bank(studio, 'settle', page.sessionId);
  expect(await reconcileCheckouts(studio.services)).toBe(1);
  expect((await commission(studio, delayed)).deal).toBe('booked');
});

it('goes on past a page that cannot be looked up, and says at the end that there was one', async () => {
  const refs = [await agreed(studio), await agreed(studio), await agreed(studio)];
  for (const ref of refs) await payAt(studio, (await openPage(studio, ref)).url);
  studio.parcels.splice(0);
  later(2);
  const [first] = await sessionsOf(studio, refs[0]!);
  studio.fake.faults.set({ errors: { times: 3, status: 500 }, path: `/v1/checkout/sessions/${first!.id}` });
  await expect(reconcileCheckouts(studio.services)).rejects.toThrow('1 payment pages could not be looked up');
  expect(await ledgerOf(studio, refs[0]!)).toEqual([]);
  for (const ref of refs.slice(1)) expect(await ledgerOf(studio, ref)).toHaveLength(1);
  await TASKS['reconcile']!(studio.services, {});
  expect(await ledgerOf(studio, refs[0]!)).toHaveLength(1);
});

it('closes a page that Stripe does not know, so that none points at nothing', async () => {
  const { db } = studio.services;
  const ref = await agreed(studio);
  const page = await openPage(studio, ref);
  await db.update(checkoutSessions).set({ id: 'cs_test_unknown' }).where(eq(checkoutSessions.id, page.sessionId));
  later(2);
  expect(await reconcileCheckouts(studio.services)).toBe(1);
  expect(await sessionsOf(studio, ref)).toMatchObject([{ id: 'cs_test_unknown', state: 'expired' }]);
});

it('is not what the return page does: that one only reads, whoever opens it', async () => {
  const { services, customer, other } = studio;
  const ref = await agreed(studio);
  const page = await openPage(studio, ref);
  await payAt(studio, page.url);
  studio.parcels.splice(0);
  for (let visit = 0; visit < 3; visit += 1) {
    expect(await readPaymentReturn(services, customer, ref, page.sessionId)).toMatchObject({
      ok: true,
      value: { state: 'open', amountMinor: page.amountMinor, receiptNo: null },
    });
  }
  expect(await ledgerOf(studio, ref)).toEqual([]);
  expect(codeOf(await readPaymentReturn(services, other, ref, page.sessionId))).toBe('not-found');
  expect(codeOf(await readPaymentReturn(services, customer, await agreed(studio), page.sessionId))).toBe('not-found');
  expect(codeOf(await readPaymentReturn(services, customer, ref, null))).toBe('not-found');
  later(2);
  await reconcileCheckouts(services);
  const [entry] = await ledgerOf(studio, ref);
  expect(await readPaymentReturn(services, customer, ref, page.sessionId)).toMatchObject({
    ok: true,
    value: { state: 'paid', receiptNo: entry!.receiptNo },
  });
});
