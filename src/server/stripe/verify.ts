import type Stripe from 'stripe';
import { done, refuse, type Outcome } from '../../commission/problem';
import type { Services } from '../services';

/** Checks the signature over the raw body (300 s tolerance, the SDK's own) and returns the event. */
export async function verifyStripeEvent(
  { stripe, config }: Services,
  rawBody: string,
  signature: string | null,
): Promise<Outcome<Stripe.Event>> {
  if (!signature) return refuse('invalid', 'The event carries no signature.');
  try {
    return done(await stripe.webhooks.constructEventAsync(rawBody, signature, config.stripeWebhookSecret));
  } catch (error) {
    // Any throw here is about the outside's bytes: a wrong signature, a stale one, or a body that is not JSON.
    return refuse(
      'invalid',
      `The event was refused: ${error instanceof Error ? error.message.split('\n')[0] : 'unreadable'}`,
    );
  }
}
