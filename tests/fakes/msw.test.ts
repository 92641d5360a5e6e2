// The same fakes behind the services' real hosts: the SDKs as they come, nothing listens, nothing leaves.
import { setupServer } from 'msw/node';
import { Resend } from 'resend';
import Stripe from 'stripe';
import { expect, onTestFinished, test } from 'vitest';
import { fakeServices } from '../../fakes/msw';
import type { Parcel } from '../../fakes/state/deliveries';
import { STRIPE_SECRET, deposit, postForm } from './rig';

function intercept() {
  const parcels: Parcel[] = [];
  const send = async (parcel: Parcel): Promise<number> => {
    parcels.push(parcel);
    return 200;
  };
  const webhook = { url: 'http://localhost:4321/api/stripe/webhook', secret: STRIPE_SECRET };
  const services = fakeServices({ stripe: { send, webhook }, resend: { outcomeAfterMs: 0 } });
  const server = setupServer(...services.handlers);
  server.listen({ onUnhandledRequest: 'error' });
  onTestFinished(async () => {
    server.close();
    await services.close();
  });
  return { ...services, parcels };
}

test('both SDKs work at their real hosts', async () => {
  const { stripe: fake, parcels } = intercept();
  const stripe = new Stripe('sk_test_pourwright', { telemetry: false });
  const made = await stripe.checkout.sessions.create(deposit());
  expect(made.url).toBe(`https://api.stripe.com/pay/${made.id}`);
  expect((await postForm(made.url ?? '', { choice: '4242424242424242' })).status).toBe(303);
  expect((await stripe.checkout.sessions.retrieve(made.id)).payment_status).toBe('paid');
  await fake.webhooksSettled();
  const events = await Promise.all(
    parcels.map(({ body, headers }) =>
      stripe.webhooks.constructEventAsync(body, headers['stripe-signature'] ?? '', STRIPE_SECRET),
    ),
  );
  expect(events.map((event) => event.type)).toContain('checkout.session.completed');
  const resend = new Resend('re_pourwright');
  const sent = await resend.emails.send({
    from: 'studio@example.org',
    to: 'a@example.org',
    subject: 'Hello',
    text: 'Hi',
  });
  expect((await resend.emails.get(sent.data?.id ?? '')).data?.last_event).toBe('delivered');
});

test('a lost answer is a connection error there too', async () => {
  const { stripe: fake, resend: mail } = intercept();
  mail.faults.set({ dropAnswers: 1 });
  const resend = new Resend('re_pourwright');
  const lost = await resend.emails.send({
    from: 'studio@example.org',
    to: 'a@example.org',
    subject: 'Hello',
    text: 'Hi',
  });
  expect(lost.error?.name).toBe('application_error');
  fake.faults.set({ dropAnswers: 5 });
  const stripe = new Stripe('sk_test_pourwright', { telemetry: false, maxNetworkRetries: 0 });
  await expect(stripe.customers.create({})).rejects.toBeInstanceOf(Stripe.errors.StripeConnectionError);
});
