import Stripe from 'stripe';
import { refuse } from '../../commission/problem';
import type { Services } from '../services';

/** True when Stripe could not be reached, was too busy, or broke: no fault of the request. */
export function isAway(error: unknown): boolean {
  if (!(error instanceof Stripe.errors.StripeError)) return false;
  const busy = error.statusCode === 409 || error.statusCode === 429;
  return busy || error instanceof Stripe.errors.StripeConnectionError || error instanceof Stripe.errors.StripeAPIError;
}

/** What a payer is told while Stripe is away. */
export function payLater() {
  return refuse(
    'unavailable',
    'The payment page could not be opened just now, and nothing was taken. Try again in a minute.',
  );
}

/** What Stripe says of a Checkout session now, its payment included; null when it knows none of that id. */
export async function askForSession({ stripe }: Services, sessionId: string): Promise<Stripe.Checkout.Session | null> {
  try {
    return await stripe.checkout.sessions.retrieve(sessionId, { expand: ['payment_intent'] });
  } catch (error) {
    if (error instanceof Stripe.errors.StripeError && error.code === 'resource_missing') return null;
    throw error;
  }
}

/**
 * Makes something at Stripe under an idempotency key. A failure of Stripe's is remembered under its key for a day and
 * would be repeated to every later try, so a repeated failure goes on to the next key of the row.
 */
export async function createOnce<T>(key: string, create: (idempotencyKey: string) => Promise<T>): Promise<T> {
  for (let round = 1; ; round += 1) {
    try {
      return await create(round === 1 ? key : `${key}:again-${round}`);
    } catch (error) {
      const repeated =
        error instanceof Stripe.errors.StripeAPIError && error.headers?.['idempotent-replayed'] === 'true';
      if (!repeated || round === MOST_ROUNDS) throw error;
    }
  }
}

const MOST_ROUNDS = 5;
