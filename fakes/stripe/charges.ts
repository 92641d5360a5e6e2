import type Stripe from 'stripe';
import { z } from 'zod';
import { freshId } from '../state/ids';
import { noSuch } from './errors';
import { inRange, pageOf } from './lists';
import { paging, range, readParams } from './params';
import type { Route } from './routes';
import type { Means, World } from './world';

type ChargeStart = {
  intent: Stripe.PaymentIntent;
  means: Means;
  status: 'succeeded' | 'pending' | 'failed';
  failure?: { code: string; message: string };
};

/** One attempt to take the money of an intent. Call inside a write. */
export function createCharge(world: World, { intent, means, status, failure }: ChargeStart): Stripe.Charge {
  const id = freshId(means.kind === 'card' ? 'ch_3' : 'py_3');
  const charge = {
    ...emptyFields(),
    id,
    object: 'charge',
    amount: intent.amount,
    amount_captured: status === 'failed' ? 0 : intent.amount,
    amount_refunded: 0,
    balance_transaction: null,
    billing_details: { address: null, email: means.email, name: null, phone: null, tax_id: null },
    calculated_statement_descriptor: intent.statement_descriptor,
    captured: status !== 'failed',
    created: world.now(),
    currency: intent.currency,
    customer: typeof intent.customer === 'string' ? intent.customer : null,
    description: intent.description,
    disputed: false,
    failure_code: failure?.code ?? null,
    failure_message: failure?.message ?? null,
    livemode: false,
    metadata: intent.metadata,
    outcome: outcomeOf(failure),
    paid: status === 'succeeded',
    payment_intent: intent.id,
    payment_method: means.id,
    payment_method_details: detailsOf(means),
    receipt_email: intent.receipt_email,
    refunded: false,
    statement_descriptor: intent.statement_descriptor,
    status,
  } satisfies Stripe.Charge;
  world.tables.charges.put(id, charge);
  return status === 'succeeded' ? bookCharge(world, charge) : charge;
}

/** Enters a charge that has come in into the balance, with the processor's fee. Call inside a write. */
export function bookCharge(world: World, charge: Stripe.Charge): Stripe.Charge {
  const debit = charge.id.startsWith('py_');
  const entry = bookBalance(world, {
    amount: charge.amount,
    fee: feeOf(charge.amount, debit),
    currency: charge.currency,
    source: charge.id,
    type: debit ? 'payment' : 'charge',
  });
  const booked: Stripe.Charge = { ...charge, status: 'succeeded', paid: true, balance_transaction: entry.id };
  return world.tables.charges.put(charge.id, booked);
}

type Entry = { amount: number; fee: number; currency: string; source: string; type: Stripe.BalanceTransaction.Type };

/** One line of the balance; amount and fee in minor units, money going out is negative. Call inside a write. */
export function bookBalance(world: World, entry: Entry): Stripe.BalanceTransaction {
  const id = freshId('txn_3');
  const what = entry.type === 'payment' ? 'charge' : entry.type;
  const detail = { amount: entry.fee, application: null, currency: entry.currency };
  return world.tables.balance.put(id, {
    id,
    object: 'balance_transaction',
    amount: entry.amount,
    available_on: world.now() + 7 * 24 * 60 * 60,
    balance_type: 'payments',
    created: world.now(),
    currency: entry.currency,
    description: null,
    exchange_rate: null,
    fee: entry.fee,
    fee_details: entry.fee ? [{ ...detail, description: 'Stripe processing fees', type: 'stripe_fee' }] : [],
    net: entry.amount - entry.fee,
    reporting_category: what,
    source: entry.source,
    status: 'pending',
    type: entry.type,
  });
}

/**
 * A plausible fee in minor units: 1.5 % and 20 for cards, 1 % within 20 and 400 for debits. From memory and without a
 * source: what matters is that callers read the fee instead of computing it.
 */
function feeOf(amount: number, debit: boolean): number {
  if (debit) return Math.min(400, Math.max(20, Math.round(amount / 100)));
  return Math.round((amount * 15) / 1000) + 20;
}

function outcomeOf(failure: ChargeStart['failure']): Stripe.Charge.Outcome {
  return {
    advice_code: failure ? 'try_again_later' : null,
    network_advice_code: null,
    network_decline_code: null,
    network_status: failure ? 'declined_by_network' : 'approved_by_network',
    reason: failure ? 'generic_decline' : null,
    risk_level: 'normal',
    seller_message: failure ? 'The bank did not say why it declined.' : 'Payment complete.',
    type: failure ? 'issuer_declined' : 'authorized',
  };
}

function detailsOf(means: Means): Stripe.Charge.PaymentMethodDetails {
  if (means.kind === 'debit') return { type: means.number };
  const card: Stripe.Charge.PaymentMethodDetails.Card = {
    amount_authorized: null,
    authorization_code: null,
    brand: 'visa',
    checks: { address_line1_check: null, address_postal_code_check: null, cvc_check: 'pass' },
    country: 'GB',
    electronic_commerce_indicator: null,
    exp_month: 12,
    exp_year: 2034,
    funding: 'credit',
    installments: null,
    last4: means.number.slice(-4),
    mandate: null,
    network: 'visa',
    network_transaction_id: null,
    regulated_status: 'unregulated',
    three_d_secure: null,
    transaction_link_id: null,
    wallet: null,
  };
  return { type: 'card', card };
}

function emptyFields() {
  return {
    application: null,
    application_fee: null,
    application_fee_amount: null,
    failure_balance_transaction: null,
    fraud_details: {},
    on_behalf_of: null,
    receipt_number: null,
    receipt_url: null,
    review: null,
    shipping: null,
    source: null,
    source_transfer: null,
    statement_descriptor_suffix: null,
    transfer_data: null,
    transfer_group: null,
  } satisfies Partial<Stripe.Charge>;
}

/** The charge with this id. @throws Refusal (404) when there is none. */
export function chargeOnFile(world: World, id: string, param = 'charge'): Stripe.Charge {
  const charge = world.tables.charges.get(id);
  if (!charge) throw noSuch('charge', id, param);
  return charge;
}

const listSchema = z.strictObject({
  ...paging,
  created: range,
  customer: z.string().optional(),
  payment_intent: z.string().optional(),
});

export const chargeRoutes: Route[] = [
  {
    method: 'GET',
    path: '/v1/charges',
    run: ({ world, input }) => {
      const wanted = readParams(listSchema, input);
      const rows = world.tables.charges
        .newest()
        .filter((charge) => inRange(charge.created, wanted.created))
        .filter((charge) => !wanted.customer || charge.customer === wanted.customer)
        .filter((charge) => !wanted.payment_intent || charge.payment_intent === wanted.payment_intent);
      return pageOf(rows, wanted, '/v1/charges');
    },
  },
  { method: 'GET', path: '/v1/charges/:id', run: ({ world, id }) => chargeOnFile(world, id) },
  {
    method: 'GET',
    path: '/v1/balance_transactions/:id',
    run: ({ world, id }) => {
      const entry = world.tables.balance.get(id);
      if (!entry) throw noSuch('balance transaction', id);
      return entry;
    },
  },
];
