import type Stripe from 'stripe';
import { z } from 'zod';
import { freshId } from '../state/ids';
import { testCard } from './cards';
import { bookBalance, chargeOnFile } from './charges';
import { mergeMetadata } from './customers';
import { Refusal, badParam, noSuch } from './errors';
import { emit } from './events';
import { intentOnFile } from './intents';
import { inRange, pageOf } from './lists';
import { metadata, paging, range, readParams, whole } from './params';
import type { Route } from './routes';
import type { World } from './world';

const createSchema = z.strictObject({
  amount: whole.refine((amount) => amount >= 1, 'This value must be at least 1.').optional(),
  charge: z.string().optional(),
  payment_intent: z.string().optional(),
  reason: z.enum(['duplicate', 'fraudulent', 'requested_by_customer']).optional(),
  metadata,
});
const updateSchema = z.strictObject({ metadata });
const listSchema = z.strictObject({
  ...paging,
  created: range,
  charge: z.string().optional(),
  payment_intent: z.string().optional(),
});

function createRefund(world: World, input: z.output<typeof createSchema>): Stripe.Refund {
  const charge = chargeToRefund(world, input);
  const left = charge.amount - charge.amount_refunded;
  if (left === 0) {
    throw new Refusal(400, `Charge ${charge.id} has already been refunded.`, { code: 'charge_already_refunded' });
  }
  const amount = input.amount ?? left;
  if (amount > left) {
    throw badParam(
      'amount',
      `Refund amount (${amount}) is greater than unrefunded amount on charge (${left}), in minor units of ${charge.currency}.`,
    );
  }
  const id = freshId('re_3');
  const entry = bookBalance(world, { amount: -amount, fee: 0, currency: charge.currency, source: id, type: 'refund' });
  const refund = {
    id,
    object: 'refund',
    amount,
    balance_transaction: entry.id,
    charge: charge.id,
    created: world.now(),
    currency: charge.currency,
    customer: null,
    customer_account: null,
    destination_details: { type: charge.payment_method_details?.type ?? 'card' },
    metadata: input.metadata ?? {},
    payment_intent: charge.payment_intent,
    payment_method: charge.payment_method,
    reason: input.reason ?? null,
    receipt_number: null,
    source_transfer_reversal: null,
    status: behaviour(world, charge) === 'waits' ? 'pending' : 'succeeded',
    transfer_reversal: null,
  } satisfies Stripe.Refund;
  world.tables.refunds.put(id, refund);
  emit(world, 'refund.created', refund);
  emit(world, 'charge.refunded', addRefunded(world, charge, amount));
  return refund;
}

function chargeToRefund(world: World, input: z.output<typeof createSchema>): Stripe.Charge {
  if (input.charge) return refundable(chargeOnFile(world, input.charge));
  if (!input.payment_intent) {
    throw badParam(
      'payment_intent',
      'One of the following params should be provided for this request: payment_intent or charge.',
      'parameter_missing',
    );
  }
  const intent = intentOnFile(world, input.payment_intent, 'payment_intent');
  if (typeof intent.latest_charge !== 'string') {
    throw new Refusal(400, `This PaymentIntent (${intent.id}) does not have a successful charge to refund.`, {
      code: 'resource_missing',
      param: 'payment_intent',
    });
  }
  return refundable(chargeOnFile(world, intent.latest_charge));
}

function refundable(charge: Stripe.Charge): Stripe.Charge {
  if (charge.status === 'succeeded') return charge;
  throw new Refusal(400, `Charge ${charge.id} has not succeeded, so it cannot be refunded.`, {
    code: 'charge_not_refundable',
  });
}

function behaviour(world: World, charge: Stripe.Charge): 'succeeds' | 'fails' | 'waits' {
  const means = charge.payment_method ? world.tables.means.get(charge.payment_method) : undefined;
  if (means?.kind === 'debit') return 'succeeds';
  return testCard(means?.number ?? '')?.refund ?? 'succeeds';
}

function addRefunded(world: World, charge: Stripe.Charge, amount: number): Stripe.Charge {
  const total = charge.amount_refunded + amount;
  return world.tables.charges.put(charge.id, { ...charge, amount_refunded: total, refunded: total === charge.amount });
}

/** What the card of a refund will do with it: for the page that plays the bank. */
export function refundWaitsFor(world: World, refund: Stripe.Refund): 'arrive' | 'fail' | null {
  const charge = typeof refund.charge === 'string' ? world.tables.charges.get(refund.charge) : undefined;
  if (refund.status === 'pending') return 'arrive';
  if (refund.status === 'succeeded' && charge && behaviour(world, charge) === 'fails') return 'fail';
  return null;
}

/**
 * Plays the bank: a pending refund arrives, or a refund comes back and its amount counts as unrefunded again. Call
 * inside a write.
 * @throws Refusal when the refund has failed already, or has arrived and is to arrive once more.
 */
export function endRefund(world: World, id: string, arrives: boolean): Stripe.Refund {
  const refund = refundOnFile(world, id);
  if (arrives ? refund.status !== 'pending' : refund.status === 'failed') {
    throw new Refusal(400, `Refund ${id} has a status of ${refund.status}: nothing is left to happen to it.`);
  }
  if (arrives) {
    const arrived = world.tables.refunds.put(id, { ...refund, status: 'succeeded' });
    emit(world, 'refund.updated', arrived);
    return arrived;
  }
  const { amount, currency } = refund;
  const entry = bookBalance(world, { amount, fee: 0, currency, source: id, type: 'refund_failure' });
  const change = { status: 'failed', failure_reason: 'lost_or_stolen_card', failure_balance_transaction: entry.id };
  const failed = world.tables.refunds.put(id, { ...refund, ...change });
  if (typeof refund.charge === 'string') addRefunded(world, chargeOnFile(world, refund.charge), -amount);
  emit(world, 'refund.updated', failed);
  emit(world, 'refund.failed', failed);
  return failed;
}

function refundOnFile(world: World, id: string): Stripe.Refund {
  const refund = world.tables.refunds.get(id);
  if (!refund) throw noSuch('refund', id);
  return refund;
}

export const refundRoutes: Route[] = [
  {
    method: 'POST',
    path: '/v1/refunds',
    run: ({ world, input }) => createRefund(world, readParams(createSchema, input)),
  },
  {
    method: 'GET',
    path: '/v1/refunds',
    run: ({ world, input }) => {
      const wanted = readParams(listSchema, input);
      const rows = world.tables.refunds
        .newest()
        .filter((refund) => inRange(refund.created, wanted.created))
        .filter((refund) => !wanted.charge || refund.charge === wanted.charge)
        .filter((refund) => !wanted.payment_intent || refund.payment_intent === wanted.payment_intent);
      return pageOf(rows, wanted, '/v1/refunds');
    },
  },
  { method: 'GET', path: '/v1/refunds/:id', run: ({ world, id }) => refundOnFile(world, id) },
  {
    method: 'POST',
    path: '/v1/refunds/:id',
    run: ({ world, id, input }) => {
      const refund = refundOnFile(world, id);
      const pairs = mergeMetadata(refund.metadata, readParams(updateSchema, input).metadata);
      const updated = world.tables.refunds.put(id, { ...refund, metadata: pairs });
      emit(world, 'refund.updated', updated);
      return updated;
    },
  },
];
