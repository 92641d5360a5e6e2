import type Stripe from 'stripe';
import { done, refuse, type Outcome } from '../../commission/problem';
import type { Services } from '../services';

/** Seconds a signature may lie in the past or in the future. */
const TOLERANCE_SECONDS = 300;

/**
 * Checks the signature over the raw body and returns the event. The machine's own clock counts here, as it
 * does for the sender.
 */
export async function verifyStripeEvent(
  { stripe, config }: Services,
  rawBody: string,
  signature: string | null,
): Promise<Outcome<Stripe.Event>> {
  if (!signature) return refuse('invalid', 'The event carries no signature.');
  if (isFromTheFuture(signature)) return refuse('invalid', 'The event was signed in the future. Set the clocks right.');
  try {
    const secret = config.stripeWebhookSecret;
    return done(await stripe.webhooks.constructEventAsync(rawBody, signature, secret, TOLERANCE_SECONDS));
  } catch {
    // Any throw here is about the outside's bytes: a wrong signature, a stale one, or a body that is not JSON.
    return refuse(
      'invalid',
      'The event’s signature does not fit its bytes and our secret, or it is older than five minutes.',
    );
  }
}

/** The library refuses signatures that are too old; one dated ahead it would take at any later time. */
function isFromTheFuture(signature: string): boolean {
  const at = Number(/(?:^|,)t=(\d+)/.exec(signature)?.[1] ?? 0);
  return at > Date.now() / 1000 + TOLERANCE_SECONDS;
}
