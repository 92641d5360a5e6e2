// Judge: the official SDK (stripe 23.1.0) and its types; the two refund test cards as in Stripe's page on testing.
import type Stripe from 'stripe';
import { expect, test } from 'vitest';
import { deposit, errorOf, postForm, press, runStripe } from './rig';

async function paidIntent(stripe: Stripe, card: string): Promise<string> {
  const made = await stripe.checkout.sessions.create(deposit());
  await postForm(made.url ?? '', { choice: card });
  return String((await stripe.checkout.sessions.retrieve(made.id)).payment_intent);
}

test('parts are refunded until nothing is left, never more', async () => {
  const { stripe } = await runStripe();
  const intent = await paidIntent(stripe, '4242424242424242');
  const part = await stripe.refunds.create({ payment_intent: intent, amount: 6_072, reason: 'requested_by_customer' });
  expect(part).toMatchObject({ amount: 6_072, status: 'succeeded', payment_intent: intent });
  const over = await errorOf(stripe.refunds.create({ payment_intent: intent, amount: 59_929 }));
  expect(over).toMatchObject({ statusCode: 400, param: 'amount' });
  const rest = await stripe.refunds.create({ payment_intent: intent });
  expect(rest.amount).toBe(59_928);
  expect(await errorOf(stripe.refunds.create({ payment_intent: intent }))).toMatchObject({
    code: 'charge_already_refunded',
  });
  const charge = await stripe.charges.retrieve(String(rest.charge), { expand: ['refunds'] });
  expect(charge).toMatchObject({ amount_refunded: 66_000, refunded: true });
  expect(charge.refunds?.data.map((refund) => refund.id)).toEqual([rest.id, part.id]);
  expect((await stripe.refunds.list({ payment_intent: intent })).data.map((one) => one.id)).toEqual([rest.id, part.id]);
  expect((await stripe.refunds.retrieve(part.id)).amount).toBe(6_072);
  const told = await stripe.events.list({ types: ['charge.refunded', 'refund.created'] });
  expect(told.data).toHaveLength(4);
});

test('refunds asked for at once share what is left', async () => {
  const { stripe } = await runStripe();
  const intent = await paidIntent(stripe, '4242424242424242');
  const asking = Array.from({ length: 10 }, () => stripe.refunds.create({ payment_intent: intent, amount: 20_000 }));
  const outcomes = await Promise.allSettled(asking);
  expect(outcomes.filter((outcome) => outcome.status === 'fulfilled')).toHaveLength(3);
});

test('a refund to a card that fails comes back and its amount is unrefunded again', async () => {
  const { stripe, url } = await runStripe();
  const intent = await paidIntent(stripe, '4000000000005126');
  const refund = await stripe.refunds.create({ payment_intent: intent, amount: 10_000 });
  expect(refund.status).toBe('succeeded');
  expect((await press(url, 'refund-fails', refund.id)).status).toBe(303);
  expect((await press(url, 'refund-fails', refund.id)).status).toBe(400);
  const failed = await stripe.refunds.retrieve(refund.id, { expand: ['charge', 'failure_balance_transaction'] });
  expect(failed).toMatchObject({ status: 'failed', charge: { amount_refunded: 0, refunded: false } });
  expect(failed.failure_reason).toBeTruthy();
  expect(failed.failure_balance_transaction).toMatchObject({ amount: 10_000, type: 'refund_failure' });
  const told = await stripe.events.list({ types: ['refund.failed', 'refund.updated'] });
  expect(told.data.map((event) => event.type)).toEqual(['refund.failed', 'refund.updated']);
});

test('a refund to a slow card is pending until the bank has it', async () => {
  const { stripe, url } = await runStripe();
  const intent = await paidIntent(stripe, '4000000000007726');
  const refund = await stripe.refunds.create({ payment_intent: intent });
  expect(refund.status).toBe('pending');
  await press(url, 'refund-arrives', refund.id);
  expect((await stripe.refunds.retrieve(refund.id)).status).toBe('succeeded');
  expect((await stripe.events.list({ type: 'refund.updated' })).data).toHaveLength(1);
});

test('a debit on its way cannot be refunded', async () => {
  const { stripe } = await runStripe();
  const intent = await paidIntent(stripe, 'debit');
  expect(await errorOf(stripe.refunds.create({ payment_intent: intent }))).toMatchObject({
    code: 'charge_not_refundable',
  });
});
