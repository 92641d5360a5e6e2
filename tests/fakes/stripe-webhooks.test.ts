// Judge: `stripe.webhooks.constructEventAsync` of the official SDK (stripe 23.1.0); retries as in Stripe's page on webhooks.
import Stripe from 'stripe';
import { expect, test } from 'vitest';
import {
  STRIPE_SECRET,
  control,
  deposit,
  errorOf,
  freshFolder,
  postForm,
  press,
  runReceiver,
  runStripe,
  stripeClient,
  type Received,
} from './rig';

const judge = stripeClient(1);

function read(received: Received, secret = STRIPE_SECRET): Promise<Stripe.Event> {
  return judge.webhooks.constructEventAsync(received.body, String(received.headers['stripe-signature']), secret);
}

async function typesOf(all: Received[]): Promise<string[]> {
  return (await Promise.all(all.map((one) => read(one)))).map((event) => event.type).sort();
}

test('every event of a payment arrives once, signed so that the SDK believes it', async () => {
  const receiver = await runReceiver();
  const { stripe } = await runStripe({ webhook: { url: receiver.url, secret: STRIPE_SECRET } });
  const made = await stripe.checkout.sessions.create(deposit());
  await postForm(made.url ?? '', { choice: '4242424242424242' });
  const all = await receiver.until(4);
  expect(await typesOf(all)).toEqual([
    'charge.succeeded',
    'checkout.session.completed',
    'payment_intent.created',
    'payment_intent.succeeded',
  ]);
  const events = await Promise.all(all.map((one) => read(one)));
  const completed = events.find((event) => event.type === 'checkout.session.completed');
  if (completed?.type !== 'checkout.session.completed') throw new Error('no completed event');
  expect(completed.data.object).toMatchObject({ id: made.id, payment_status: 'paid', amount_total: 66_000 });
  expect(completed.api_version).toBe(Stripe.API_VERSION);
  expect(await stripe.events.retrieve(completed.id)).toMatchObject({ id: completed.id, pending_webhooks: 0 });
});

test('a changed body or another secret is not believed', async () => {
  const receiver = await runReceiver();
  const { stripe } = await runStripe({ webhook: { url: receiver.url, secret: STRIPE_SECRET } });
  await stripe.customers.create({});
  const [received] = await receiver.until(1);
  if (!received) throw new Error('nothing arrived');
  await expect(read(received, 'whsec_another')).rejects.toThrow(Stripe.errors.StripeSignatureVerificationError);
  await expect(read({ ...received, body: received.body.replace('evt_', 'evt_x') })).rejects.toThrow();
});

test('a receiver that fails gets the same event again until it takes it', async () => {
  const receiver = await runReceiver((_, count) => [500, 302, 404][count - 1] ?? 200);
  const { stripe, fake } = await runStripe({ webhook: { url: receiver.url, secret: STRIPE_SECRET } });
  await stripe.customers.create({});
  const all = await receiver.until(4);
  const ids = await Promise.all(all.map(async (one) => (await read(one)).id));
  expect(new Set(ids).size).toBe(1);
  await fake.webhooksSettled();
  expect((await stripe.events.list({ delivery_success: true })).data.map((event) => event.id)).toEqual([ids[0]]);
});

test('what a dead receiver missed waits through a restart of the fake', async () => {
  const stateFile = `${freshFolder()}/stripe.jsonl`;
  const dead = await runReceiver();
  await dead.close();
  const first = await runStripe({ stateFile, webhook: { url: dead.url, secret: STRIPE_SECRET } });
  const customer = await first.stripe.customers.create({ name: 'Tamsin Reedham' });
  expect((await first.stripe.events.list({ delivery_success: false })).data).toHaveLength(1);
  await first.close();
  const receiver = await runReceiver();
  const second = await runStripe({ stateFile, webhook: { url: receiver.url, secret: STRIPE_SECRET } });
  const [received] = await receiver.until(1);
  if (!received) throw new Error('nothing arrived');
  expect((await read(received)).data.object).toMatchObject({ id: customer.id });
  await second.fake.webhooksSettled();
  expect((await second.stripe.events.list({ delivery_success: false })).data).toHaveLength(0);
});

test('endpoints made by the API get what they asked for, with their own secret', async () => {
  const receiver = await runReceiver();
  const { stripe } = await runStripe();
  const endpoint = await stripe.webhookEndpoints.create({
    url: receiver.url,
    enabled_events: ['payment_intent.succeeded'],
  });
  expect(endpoint.secret).toMatch(/^whsec_/);
  const listed = (await stripe.webhookEndpoints.list()).data[0];
  expect(listed).toMatchObject({ id: endpoint.id, url: receiver.url, status: 'enabled' });
  expect(listed?.secret).toBeUndefined();
  const made = await stripe.checkout.sessions.create(deposit());
  await postForm(made.url ?? '', { choice: '4242424242424242' });
  const all = await receiver.until(1);
  expect((await read(all[0] as Received, endpoint.secret)).type).toBe('payment_intent.succeeded');
  expect(await stripe.webhookEndpoints.del(endpoint.id)).toMatchObject({ id: endpoint.id, deleted: true });
  expect(await errorOf(stripe.webhookEndpoints.retrieve(endpoint.id))).toMatchObject({ statusCode: 404 });
  await stripe.checkout.sessions.create(deposit());
  expect(receiver.all).toHaveLength(1);
});

test('webhooks can be held, sent in copies, and sent again by a button', async () => {
  const receiver = await runReceiver();
  const { stripe, url, fake } = await runStripe({ webhook: { url: receiver.url, secret: STRIPE_SECRET } });
  await control(url, { holdWebhooks: true, webhookCopies: 3 });
  await stripe.customers.create({});
  await fake.webhooksSettled();
  expect(receiver.all).toHaveLength(0);
  await control(url, { holdWebhooks: false });
  const ids = await Promise.all((await receiver.until(3)).map(async (one) => (await read(one)).id));
  expect(new Set(ids).size).toBe(1);
  await press(url, 'resend', ids[0] ?? '');
  expect((await read((await receiver.until(4))[3] as Received)).id).toBe(ids[0]);
});

test('an endpoint elsewhere is never called', async () => {
  const { stripe, url, fake } = await runStripe();
  await stripe.webhookEndpoints.create({ url: 'https://studio.example/hook', enabled_events: ['*'] });
  await stripe.customers.create({});
  await fake.webhooksSettled();
  expect(await (await fetch(url)).text()).toContain('studio.example is not on this machine');
});
