// Judge: the official SDK (stripe 23.1.0), its types and its error classes; behaviours as in Stripe's API reference.
import Stripe from 'stripe';
import { expect, test } from 'vitest';
import { errorOf, runStripe, stripeClient } from './rig';

test('a customer is created, found, changed and listed', async () => {
  const { stripe } = await runStripe();
  const made = await stripe.customers.create({
    name: 'Isolde Wintermere',
    email: 'isolde@example.org',
    metadata: { commission: 'MF-0181', kind: 'collector' },
    address: { line1: '3 Reed Lane', city: 'Ostrey Quay', country: 'GB' },
  });
  expect(made.id).toMatch(/^cus_\w{14}$/);
  expect(made.address?.city).toBe('Ostrey Quay');
  const changed = await stripe.customers.update(made.id, { name: '', metadata: { kind: '', since: '2026' } });
  expect(changed.name).toBeNull();
  expect(changed.metadata).toEqual({ commission: 'MF-0181', since: '2026' });
  expect(await stripe.customers.retrieve(made.id)).toMatchObject({
    id: made.id,
    email: 'isolde@example.org',
    name: null,
  });
  await stripe.customers.create({ email: 'rafe@example.org' });
  const found = await stripe.customers.list({ email: 'isolde@example.org' });
  expect(found.data.map((customer) => customer.id)).toEqual([made.id]);
});

test('lists are cut from the newest on, forwards and backwards', async () => {
  const { stripe } = await runStripe();
  const ids: string[] = [];
  for (let count = 0; count < 12; count += 1) ids.unshift((await stripe.customers.create({})).id);
  const first = await stripe.customers.list();
  expect(first.data.map((one) => one.id)).toEqual(ids.slice(0, 10));
  expect(first.has_more).toBe(true);
  const rest = await stripe.customers.list({ starting_after: ids[9] });
  expect(rest.data.map((one) => one.id)).toEqual(ids.slice(10));
  expect(rest.has_more).toBe(false);
  const back = await stripe.customers.list({ ending_before: ids[5], limit: 3 });
  expect(back.data.map((one) => one.id)).toEqual(ids.slice(2, 5));
  expect(back.has_more).toBe(true);
  const walked: string[] = [];
  for await (const customer of stripe.customers.list({ limit: 5 })) walked.push(customer.id);
  expect(walked).toEqual(ids);
});

test('what cannot be taken is refused in the shape the SDK expects', async () => {
  const { stripe } = await runStripe();
  const missing = await errorOf(stripe.customers.retrieve('cus_nobody'));
  expect(missing).toBeInstanceOf(Stripe.errors.StripeInvalidRequestError);
  expect(missing).toMatchObject({ statusCode: 404, code: 'resource_missing', param: 'id' });
  expect(missing.message).toContain('cus_nobody');
  expect(missing.requestId).toMatch(/^req_/);
  const limit = await errorOf(stripe.customers.list({ limit: 101 }));
  expect(limit).toMatchObject({ statusCode: 400, param: 'limit' });
  const strange = await errorOf(stripe.customers.create({ shoe_size: 9 } as Stripe.CustomerCreateParams));
  expect(strange).toMatchObject({ code: 'parameter_unknown', param: 'shoe_size' });
  const wrong = await errorOf(stripe.customers.list({ limit: 'many' as unknown as number }));
  expect(wrong).toMatchObject({ code: 'parameter_invalid_integer', param: 'limit' });
  const deep = await errorOf(stripe.rawRequest('GET', '/v1/nothing') as Promise<unknown>);
  expect(deep).toMatchObject({ statusCode: 404, type: 'StripeInvalidRequestError' });
});

test('every key but the test key is refused, and no key at all as well', async () => {
  const { port, url } = await runStripe();
  for (const key of ['sk_test_other_0001', 'sk_live_pourwright', 'rk_test_pourwright', 'pk_test_pourwright']) {
    const error = await errorOf(stripeClient(port, key).customers.list());
    expect(error).toBeInstanceOf(Stripe.errors.StripeAuthenticationError);
    expect(error.statusCode).toBe(401);
    expect(error.message).toContain(key.slice(-4));
    expect(error.message).not.toContain(key);
  }
  const bare = await fetch(`${url}/v1/customers`);
  expect(bare.status).toBe(401);
  expect(await bare.json()).toMatchObject({ error: { type: 'invalid_request_error' } });
});

test('answers name the request and echo the API version of the SDK', async () => {
  const { stripe } = await runStripe();
  const customer = await stripe.customers.create({ name: 'Rafe Lindqvale' });
  expect(customer.lastResponse.requestId).toMatch(/^req_/);
  expect(customer.lastResponse.apiVersion).toBe(Stripe.API_VERSION);
  const event = (await stripe.events.list({ type: 'customer.created' })).data[0];
  expect(event?.api_version).toBe('2026-10-28.endive');
  expect(event?.request?.id).toBe(customer.lastResponse.requestId);
});
