// Judge: the official SDK (stripe 23.1.0); rules as in Stripe's API reference, "Idempotent requests".
import Stripe from 'stripe';
import { expect, test } from 'vitest';
import { control, deposit, errorOf, freshFolder, runStripe, stripeClient } from './rig';

test('the same key with the same parameters gives the same answer, also after a restart', async () => {
  const stateFile = `${freshFolder()}/stripe.jsonl`;
  const first = await runStripe({ stateFile });
  const idempotencyKey = 'deposit-of-MF-0181';
  const made = await first.stripe.checkout.sessions.create(deposit(), { idempotencyKey });
  const again = await first.stripe.checkout.sessions.create(deposit(), { idempotencyKey });
  expect(again.id).toBe(made.id);
  expect(again.lastResponse.headers['idempotent-replayed']).toBe('true');
  await first.close();
  const second = await runStripe({ stateFile });
  const later = await second.stripe.checkout.sessions.create(deposit(), { idempotencyKey });
  expect(later.id).toBe(made.id);
  expect((await second.stripe.checkout.sessions.list()).data).toHaveLength(1);
});

test('the same key with other parameters or for another endpoint is an error', async () => {
  const { stripe } = await runStripe();
  const options = { idempotencyKey: 'one-key' };
  await stripe.customers.create({ name: 'Hester Quillane' }, options);
  const other = await errorOf(stripe.customers.create({ name: 'Jory Pellowe' }, options));
  expect(other).toBeInstanceOf(Stripe.errors.StripeIdempotencyError);
  expect(other.statusCode).toBe(400);
  const elsewhere = await errorOf(stripe.refunds.create({ payment_intent: 'pi_x' }, options));
  expect(elsewhere.message).toContain('/v1/customers');
  const long = await errorOf(stripe.customers.create({}, { idempotencyKey: 'k'.repeat(256) }));
  expect(long.statusCode).toBe(400);
});

test('two requests with one key at the same time: one is worked on, the other gets 409', async () => {
  const { stripe, url } = await runStripe();
  await control(url, { delayMs: 150 });
  const send = () => stripe.customers.create({ name: 'Maud Evershade' }, { idempotencyKey: 'both' });
  const outcomes = await Promise.allSettled([send(), send()]);
  const lost = outcomes.flatMap((one) => (one.status === 'rejected' ? [one.reason as Stripe.errors.StripeError] : []));
  expect(lost).toHaveLength(1);
  expect(lost[0]).toMatchObject({ statusCode: 409, code: 'idempotency_key_in_use' });
  await control(url, { delayMs: 0 });
  expect((await stripe.customers.list()).data).toHaveLength(1);
});

test('a refused request is not kept: the corrected one may use the key', async () => {
  const { stripe } = await runStripe();
  const options = { idempotencyKey: 'corrected' };
  await errorOf(stripe.checkout.sessions.create(deposit({ success_url: 'nowhere' }), options));
  expect((await stripe.checkout.sessions.create(deposit(), options)).status).toBe('open');
});

test('when the answer is lost, the retry of the SDK gets what was made', async () => {
  const { stripe, url } = await runStripe();
  await control(url, { dropAnswers: 1 });
  const made = await stripe.checkout.sessions.create(deposit());
  const all = await stripe.checkout.sessions.list();
  expect(all.data.map((session) => session.id)).toEqual([made.id]);
});

test('a busy or failing service is met by the retries of the SDK', async () => {
  const { url, port } = await runStripe();
  const patient = stripeClient(port, undefined, 2);
  const impatient = stripeClient(port);
  await control(url, { errors: { times: 1, status: 429, retryAfterSeconds: 0 } });
  const limited = await errorOf(impatient.customers.create({}));
  expect(limited).toBeInstanceOf(Stripe.errors.StripeRateLimitError);
  expect(limited.headers?.['retry-after']).toBe('0');
  await control(url, { errors: { times: 2, status: 500, retryAfterSeconds: 0 } });
  expect((await patient.customers.create({})).object).toBe('customer');
  expect((await patient.customers.list()).data).toHaveLength(1);
});

test('a failure after the work is kept under the key, and the work stands', async () => {
  const { stripe, url } = await runStripe();
  await control(url, { errors: { times: 1, status: 500, after: true } });
  const options = { idempotencyKey: 'unlucky' };
  const failed = await errorOf(stripe.customers.create({ name: 'Odile Farthingale' }, options));
  expect(failed).toBeInstanceOf(Stripe.errors.StripeAPIError);
  expect((await errorOf(stripe.customers.create({ name: 'Odile Farthingale' }, options))).statusCode).toBe(500);
  expect((await stripe.customers.list()).data.map((one) => one.name)).toEqual(['Odile Farthingale']);
});
