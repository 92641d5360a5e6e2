import type Stripe from 'stripe';
import { z } from 'zod';
import { freshId } from '../state/ids';
import { Refusal, noSuch } from './errors';
import { emit } from './events';
import { inRange, pageOf } from './lists';
import { clearable, currency, metadata, paging, range, readParams, whole } from './params';
import type { Route } from './routes';
import type { World } from './world';

export type IntentInput = {
  amount: number;
  currency: string;
  customer?: string | null;
  description?: string | null;
  metadata?: Stripe.Metadata;
  receipt_email?: string | null;
  statement_descriptor?: string | null;
  payment_method_types?: string[];
};

/** A payment that waits for its means. Amount in minor units. Call inside a write. */
export function createIntent(world: World, input: IntentInput): Stripe.PaymentIntent {
  const id = freshId('pi_3');
  const intent = {
    ...emptyFields(),
    id,
    object: 'payment_intent',
    amount: input.amount,
    amount_capturable: 0,
    amount_received: 0,
    capture_method: 'automatic_async',
    client_secret: `${id}_secret_${freshId('', 25)}`,
    confirmation_method: 'automatic',
    created: world.now(),
    currency: input.currency,
    customer: input.customer ?? null,
    description: input.description ?? null,
    livemode: false,
    metadata: input.metadata ?? {},
    payment_method_types: input.payment_method_types ?? ['card'],
    receipt_email: input.receipt_email ?? null,
    statement_descriptor: input.statement_descriptor ?? null,
    status: 'requires_payment_method',
  } satisfies Stripe.PaymentIntent;
  world.tables.intents.put(id, intent);
  emit(world, 'payment_intent.created', intent);
  return intent;
}

function emptyFields() {
  return {
    allowed_payment_method_types: null,
    application: null,
    application_fee_amount: null,
    automatic_payment_methods: null,
    canceled_at: null,
    cancellation_reason: null,
    customer_account: null,
    excluded_payment_method_types: null,
    last_payment_error: null,
    latest_charge: null,
    managed_payments: null,
    next_action: null,
    on_behalf_of: null,
    payment_method: null,
    payment_method_configuration_details: null,
    payment_method_options: {},
    payment_record: null,
    processing: null,
    review: null,
    setup_future_usage: null,
    shipping: null,
    source: null,
    statement_descriptor_suffix: null,
    transfer_data: null,
    transfer_group: null,
  } satisfies Partial<Stripe.PaymentIntent>;
}

/** The payment intent with this id. @throws Refusal (404) when there is none. */
export function intentOnFile(world: World, id: string, param = 'intent'): Stripe.PaymentIntent {
  const intent = world.tables.intents.get(id);
  if (!intent) throw noSuch('payment_intent', id, param);
  return intent;
}

/** Puts changed fields over an intent. Call inside a write. */
export function changeIntent(world: World, id: string, change: Partial<Stripe.PaymentIntent>): Stripe.PaymentIntent {
  return world.tables.intents.put(id, { ...intentOnFile(world, id), ...change });
}

const CANCELABLE = ['requires_payment_method', 'requires_capture', 'requires_confirmation', 'requires_action'];

/** Calls a payment off. Call inside a write. @throws Refusal when it is made, under way or called off already. */
export function cancelIntent(world: World, id: string, reason: Stripe.PaymentIntent.CancellationReason | null) {
  const intent = intentOnFile(world, id);
  if (!CANCELABLE.includes(intent.status)) {
    const message = `You cannot cancel this PaymentIntent because it has a status of ${intent.status}. Only a PaymentIntent with one of the following statuses may be canceled: ${CANCELABLE.join(', ')}.`;
    throw new Refusal(400, message, { code: 'payment_intent_unexpected_state' });
  }
  const canceled = changeIntent(world, id, {
    status: 'canceled',
    canceled_at: world.now(),
    cancellation_reason: reason,
    next_action: null,
  });
  emit(world, 'payment_intent.canceled', canceled);
  return canceled;
}

function cancelByCall(world: World, id: string, reason: Stripe.PaymentIntent.CancellationReason | null) {
  intentOnFile(world, id);
  const open = world.tables.sessions.all().some((one) => one.payment_intent === id && one.status === 'open');
  if (open) {
    const message = 'You cannot cancel the PaymentIntent of a Checkout Session. Expire the Checkout Session instead.';
    throw new Refusal(400, message, { code: 'payment_intent_unexpected_state' });
  }
  return cancelIntent(world, id, reason);
}

const createSchema = z.strictObject({
  amount: whole.refine((amount) => amount >= 1 && amount <= 99_999_999, 'The amount must be from 1 to 99999999.'),
  currency,
  customer: z.string().optional(),
  description: clearable,
  metadata,
  receipt_email: z.email().optional(),
  payment_method_types: z.array(z.string()).min(1).optional(),
});
const cancelSchema = z.strictObject({
  cancellation_reason: z.enum(['abandoned', 'duplicate', 'fraudulent', 'requested_by_customer']).optional(),
});
const listSchema = z.strictObject({ ...paging, created: range, customer: z.string().optional() });

export const intentRoutes: Route[] = [
  {
    method: 'POST',
    path: '/v1/payment_intents',
    run: ({ world, input }) => createIntent(world, readParams(createSchema, input)),
  },
  {
    method: 'GET',
    path: '/v1/payment_intents',
    run: ({ world, input }) => {
      const wanted = readParams(listSchema, input);
      const rows = world.tables.intents
        .newest()
        .filter((intent) => inRange(intent.created, wanted.created))
        .filter((intent) => !wanted.customer || intent.customer === wanted.customer);
      return pageOf(rows, wanted, '/v1/payment_intents');
    },
  },
  { method: 'GET', path: '/v1/payment_intents/:id', run: ({ world, id }) => intentOnFile(world, id) },
  {
    method: 'POST',
    path: '/v1/payment_intents/:id/cancel',
    run: ({ world, id, input }) => cancelByCall(world, id, readParams(cancelSchema, input).cancellation_reason ?? null),
  },
];
