import type { APIRoute } from 'astro';
import { json } from '../../../server/door';
import { recordStripeEvent } from '../../../server/money/payments';
import { verifyStripeEvent } from '../../../server/stripe/verify';

export const prerender = false;

/** Stripe's events. The body is read raw, since the signature is over its bytes. */
export const POST: APIRoute = async ({ request, locals }) => {
  const { services } = locals;
  const event = await verifyStripeEvent(services, await request.text(), request.headers.get('stripe-signature'));
  if (!event.ok) {
    services.log.warn({ problem: event.problem.code }, 'a Stripe event with a bad signature was refused');
    return json({ ok: false, problem: event.problem }, 400);
  }
  const outcome = await recordStripeEvent(services, event.value);
  services.log.info({ event: event.value.id, type: event.value.type, outcome }, 'took in a Stripe event');
  return json({ received: true, outcome });
};
