import type Stripe from 'stripe';
import { freshId } from '../state/ids';
import { testCard, type TestCard } from './cards';
import { bookCharge, chargeOnFile, createCharge } from './charges';
import { createCustomer } from './customers';
import { Refusal } from './errors';
import { emit } from './events';
import { changeIntent, createIntent, intentOnFile } from './intents';
import { personDetails } from './session-shape';
import { sessionOnFile } from './sessions';
import type { Means, World } from './world';

/** What a press of the pay button came to. */
export type Outcome = { kind: 'done' } | { kind: 'confirm' } | { kind: 'refused'; message: string };

type Failure = { code: Stripe.PaymentIntent.LastPaymentError.Code; decline_code?: string; message: string };

const DECLINED: Failure = {
  code: 'card_declined',
  decline_code: 'generic_decline',
  message: 'Your card was declined.',
};
const NOT_CONFIRMED: Failure = {
  code: 'payment_intent_authentication_failure',
  message: 'The payment was not confirmed with the bank.',
};
const DEBIT_FAILED: Failure = {
  code: 'payment_method_provider_decline',
  message: 'The bank returned the debit: there was not enough money in the account.',
};

/**
 * Pays a session by a test card's number or by "debit". A session that is complete already stays as it is and counts
 * as done, so a second press of the button changes nothing. Call inside a write.
 */
export function pay(world: World, sessionId: string, choice: string, email: string): Outcome {
  const session = sessionOnFile(world, sessionId);
  if (session.status === 'complete') return { kind: 'done' };
  if (session.status !== 'open') return { kind: 'refused', message: 'This payment page has expired.' };
  const card = testCard(choice);
  const debit = session.payment_method_types.find((method) => method !== 'card');
  if (!card && !(choice === 'debit' && debit)) return { kind: 'refused', message: 'Choose how to pay.' };
  const means = keepMeans(
    world,
    card ? { kind: 'card', number: card.number, email } : { kind: 'debit', number: debit ?? '', email },
  );
  const intent = intentOf(world, session);
  if (!card) return startDebit(world, session.id, intent, means);
  return payByCard(world, session.id, intent, means, card);
}

function payByCard(
  world: World,
  sessionId: string,
  intent: Stripe.PaymentIntent,
  means: Means,
  card: TestCard,
): Outcome {
  if (card.outcome === 'declined') {
    failIntent(world, intent.id, means, DECLINED);
    return { kind: 'refused', message: DECLINED.message };
  }
  if (card.outcome === 'asks') {
    const url = `${world.publicUrl()}/pay/${sessionId}/confirm`;
    const waiting = changeIntent(world, intent.id, {
      status: 'requires_action',
      payment_method: means.id,
      next_action: { type: 'redirect_to_url', redirect_to_url: { return_url: null, url } },
    });
    emit(world, 'payment_intent.requires_action', waiting);
    return { kind: 'confirm' };
  }
  succeed(world, sessionId, intent.id, means);
  return { kind: 'done' };
}

/** Ends the second step that some cards ask for. Call inside a write. */
export function answerBank(world: World, sessionId: string, confirmed: boolean): Outcome {
  const session = sessionOnFile(world, sessionId);
  if (session.status === 'complete') return { kind: 'done' };
  const intent = typeof session.payment_intent === 'string' ? intentOnFile(world, session.payment_intent) : null;
  if (intent?.status !== 'requires_action') return { kind: 'refused', message: 'There is nothing to confirm.' };
  const means = meansOf(world, intent);
  if (!confirmed) {
    failIntent(world, intent.id, means, NOT_CONFIRMED);
    return { kind: 'refused', message: NOT_CONFIRMED.message };
  }
  succeed(world, session.id, intent.id, means);
  return { kind: 'done' };
}

/**
 * Ends a delayed payment: the money arrives or the bank returns the debit. Call inside a write.
 * @throws Refusal when no delayed payment is under way.
 */
export function endDebit(world: World, sessionId: string, arrives: boolean): void {
  const session = sessionOnFile(world, sessionId);
  const intent = typeof session.payment_intent === 'string' ? intentOnFile(world, session.payment_intent) : null;
  if (intent?.status !== 'processing' || typeof intent.latest_charge !== 'string') {
    throw new Refusal(400, 'No delayed payment of this session is under way.');
  }
  const charge = chargeOnFile(world, intent.latest_charge);
  if (!arrives) {
    const failed: Stripe.Charge = {
      ...charge,
      status: 'failed',
      captured: false,
      amount_captured: 0,
      failure_code: 'insufficient_funds',
      failure_message: DEBIT_FAILED.message,
    };
    world.tables.charges.put(charge.id, failed);
    emit(world, 'charge.failed', failed);
    enterFailure(world, intent.id, DEBIT_FAILED, charge.id);
    emit(world, 'checkout.session.async_payment_failed', session);
    return;
  }
  emit(world, 'charge.succeeded', bookCharge(world, charge));
  emit(
    world,
    'payment_intent.succeeded',
    changeIntent(world, intent.id, { status: 'succeeded', amount_received: intent.amount }),
  );
  const paid = world.tables.sessions.put(session.id, { ...session, payment_status: 'paid' });
  emit(world, 'checkout.session.async_payment_succeeded', paid);
}

function startDebit(world: World, sessionId: string, intent: Stripe.PaymentIntent, means: Means): Outcome {
  const charge = createCharge(world, { intent, means, status: 'pending' });
  emit(world, 'charge.pending', charge);
  const change = {
    status: 'processing',
    payment_method: means.id,
    latest_charge: charge.id,
    next_action: null,
  } as const;
  emit(world, 'payment_intent.processing', changeIntent(world, intent.id, change));
  complete(world, sessionId, intent.id, means.email, 'unpaid');
  return { kind: 'done' };
}

function succeed(world: World, sessionId: string, intentId: string, means: Means): void {
  const charge = createCharge(world, { intent: intentOnFile(world, intentId), means, status: 'succeeded' });
  emit(world, 'charge.succeeded', charge);
  const paid = changeIntent(world, intentId, {
    status: 'succeeded',
    amount_received: charge.amount,
    latest_charge: charge.id,
    payment_method: means.id,
    next_action: null,
    last_payment_error: null,
  });
  emit(world, 'payment_intent.succeeded', paid);
  complete(world, sessionId, intentId, means.email, 'paid');
}

function complete(world: World, id: string, intent: string, email: string, status: 'paid' | 'unpaid'): void {
  const session = sessionOnFile(world, id);
  const joins = session.customer === null && session.customer_creation === 'always';
  const customer = joins ? createCustomer(world, { email }).id : session.customer;
  if (joins) changeIntent(world, intent, { customer });
  const done = world.tables.sessions.put(id, {
    ...session,
    customer,
    customer_details: personDetails(email, null),
    payment_intent: intent,
    payment_status: status,
    status: 'complete',
    url: null,
  });
  emit(world, 'checkout.session.completed', done);
}

function failIntent(world: World, id: string, means: Means, failure: Failure): void {
  const told = { code: failure.decline_code ?? String(failure.code), message: failure.message };
  const charge = createCharge(world, { intent: intentOnFile(world, id), means, status: 'failed', failure: told });
  emit(world, 'charge.failed', charge);
  enterFailure(world, id, failure, charge.id);
}

function enterFailure(world: World, id: string, failure: Failure, charge: string): void {
  const failed = changeIntent(world, id, {
    status: 'requires_payment_method',
    latest_charge: charge,
    payment_method: null,
    next_action: null,
    last_payment_error: { ...failure, charge, type: 'card_error' },
  });
  emit(world, 'payment_intent.payment_failed', failed);
}

/** The intent of a session, made at the first attempt to pay. */
function intentOf(world: World, session: Stripe.Checkout.Session): Stripe.PaymentIntent {
  if (typeof session.payment_intent === 'string') return intentOnFile(world, session.payment_intent);
  const notes = world.tables.notes.get(session.id);
  const intent = createIntent(world, {
    amount: session.amount_total ?? 0,
    currency: session.currency ?? '',
    customer: typeof session.customer === 'string' ? session.customer : null,
    payment_method_types: session.payment_method_types,
    statement_descriptor: notes?.statement ?? null,
    ...notes?.intent,
  });
  world.tables.sessions.put(session.id, { ...session, payment_intent: intent.id });
  return intent;
}

function keepMeans(world: World, means: Omit<Means, 'id'>): Means {
  const id = freshId('pm_1');
  return world.tables.means.put(id, { id, ...means });
}

function meansOf(world: World, intent: Stripe.PaymentIntent): Means {
  const means = typeof intent.payment_method === 'string' ? world.tables.means.get(intent.payment_method) : undefined;
  if (!means) throw new Error(`${intent.id} waits for the bank without a card`);
  return means;
}
