// Judge: the official SDK (stripe 23.1.0) and its types; behaviours as in Stripe's API reference on Checkout Sessions.
import { expect, test } from 'vitest';
import { deposit, errorOf, line, postForm, press, runStripe } from './rig';

test('a session shows what it was made from', async () => {
  const { stripe, url } = await runStripe({ studio: 'Marrowfen Casting House' });
  const session = await stripe.checkout.sessions.create(
    deposit({
      line_items: [line('Palstave, side loop', 36_000, 6), line('Carriage', 1_450)],
      client_reference_id: 'MF-0179',
      metadata: { stage: 'deposit' },
      payment_intent_data: { metadata: { commission: 'MF-0179' } },
    }),
  );
  expect(session).toMatchObject({
    object: 'checkout.session',
    amount_total: 217_450,
    currency: 'gbp',
    client_reference_id: 'MF-0179',
    customer_email: 'isolde@example.org',
    metadata: { stage: 'deposit' },
    mode: 'payment',
    payment_intent: null,
    payment_status: 'unpaid',
    status: 'open',
    url: `${url}/pay/${session.id}`,
  });
  expect(session.expires_at - session.created).toBe(24 * 60 * 60);
  expect(session.line_items).toBeUndefined();
  const lines = await stripe.checkout.sessions.listLineItems(session.id);
  expect(lines.data.map((one) => [one.description, one.quantity, one.amount_total])).toEqual([
    ['Palstave, side loop', 6, 216_000],
    ['Carriage', 1, 1_450],
  ]);
  const open = await stripe.checkout.sessions.retrieve(session.id, { expand: ['line_items'] });
  expect(open.line_items?.data[0]?.price?.unit_amount_decimal?.toString()).toBe('36000');
});

test('parameters that cannot be are refused', async () => {
  const { stripe } = await runStripe({ clock: () => new Date('2026-03-02T09:00:00Z') });
  const now = Date.parse('2026-03-02T09:00:00Z') / 1000;
  const create = stripe.checkout.sessions.create.bind(stripe.checkout.sessions);
  expect(await errorOf(create(deposit({ expires_at: now + 29 * 60 })))).toMatchObject({ param: 'expires_at' });
  expect(await errorOf(create(deposit({ expires_at: now + 25 * 3600 })))).toMatchObject({ param: 'expires_at' });
  expect((await create(deposit({ expires_at: now + 30 * 60 }))).expires_at).toBe(now + 1800);
  expect(await errorOf(create(deposit({ line_items: undefined })))).toMatchObject({
    code: 'parameter_missing',
    param: 'line_items',
  });
  const loose = {
    ...line('Gouge', 100),
    price_data: { currency: 'gbp', unit_amount: 9.5, product_data: { name: 'x' } },
  };
  expect(await errorOf(create(deposit({ line_items: [loose] })))).toMatchObject({
    code: 'parameter_invalid_integer',
    param: 'line_items[0][price_data][unit_amount]',
  });
  expect(await errorOf(create(deposit({ line_items: [line('Gouge', 29)] })))).toMatchObject({
    code: 'amount_too_small',
  });
  expect(await errorOf(create(deposit({ success_url: '/paid' })))).toMatchObject({ param: 'success_url' });
  expect(await errorOf(create(deposit({ customer_email: 'isolde' })))).toMatchObject({ param: 'customer_email' });
  const customer = (await stripe.customers.create({ email: 'a@example.org' })).id;
  expect(await errorOf(create(deposit({ customer })))).toMatchObject({ code: 'parameters_exclusive' });
  expect(await errorOf(create(deposit({ customer: 'cus_no', customer_email: undefined })))).toMatchObject({
    code: 'resource_missing',
    param: 'customer',
  });
  const mixed = [
    line('Gouge', 9_000),
    { ...line('Axe', 9_000), price_data: { ...line('Axe', 9_000).price_data, currency: 'eur' } },
  ];
  expect(await errorOf(create(deposit({ line_items: mixed as never })))).toMatchObject({ param: 'line_items' });
});

test('a plain form pays, and the whole payment can be read back with its fee', async () => {
  const { stripe } = await runStripe();
  const made = await stripe.checkout.sessions.create(
    deposit({ payment_intent_data: { metadata: { commission: 'MF-0181' } } }),
  );
  const page = await (await fetch(made.url ?? '')).text();
  expect(page).toContain('£660.00');
  expect(page).toContain('isolde@example.org');
  expect(page).toContain('No money moves');
  expect(page).not.toContain('<script');
  const answer = await postForm(made.url ?? '', { choice: '4242424242424242' });
  expect(answer.status).toBe(303);
  expect(answer.headers.get('location')).toBe(`http://localhost:4321/paid?session=${made.id}`);
  const paid = await stripe.checkout.sessions.retrieve(made.id, {
    expand: ['payment_intent.latest_charge.balance_transaction', 'customer'],
  });
  expect(paid).toMatchObject({ status: 'complete', payment_status: 'paid', url: null, customer: null });
  expect(paid.customer_details?.email).toBe('isolde@example.org');
  const intent = paid.payment_intent;
  if (!intent || typeof intent === 'string') throw new Error('the intent was not opened');
  expect(intent).toMatchObject({ status: 'succeeded', amount_received: 66_000, metadata: { commission: 'MF-0181' } });
  const charge = intent.latest_charge;
  if (!charge || typeof charge === 'string') throw new Error('the charge was not opened');
  expect(charge).toMatchObject({ paid: true, amount: 66_000, payment_intent: intent.id });
  expect(charge.payment_method_details?.card?.last4).toBe('4242');
  const entry = charge.balance_transaction;
  if (!entry || typeof entry === 'string') throw new Error('the balance transaction was not opened');
  expect(entry.fee).toBeGreaterThan(0);
  expect(entry.net).toBe(66_000 - entry.fee);
  expect((await stripe.paymentIntents.list({ limit: 1 })).data[0]?.id).toBe(intent.id);
  expect((await stripe.charges.retrieve(charge.id)).id).toBe(charge.id);
  expect((await stripe.checkout.sessions.list({ payment_intent: intent.id })).data[0]?.id).toBe(made.id);
});

test('pressing pay twenty times at once pays once', async () => {
  const { stripe } = await runStripe();
  const made = await stripe.checkout.sessions.create(deposit());
  const pressing = Array.from({ length: 20 }, () => postForm(made.url ?? '', { choice: '4242424242424242' }));
  const answers = await Promise.all(pressing);
  expect(answers.map((answer) => answer.status)).toEqual(Array<number>(20).fill(303));
  expect(new Set(answers.map((answer) => answer.headers.get('location'))).size).toBe(1);
  expect((await stripe.charges.list()).data).toHaveLength(1);
  const told = await stripe.events.list({ type: 'checkout.session.completed' });
  expect(told.data).toHaveLength(1);
  expect(await (await fetch(made.url ?? '')).text()).toContain('This payment is made');
});

test('a declined card leaves the session open and says so; another card then pays', async () => {
  const { stripe } = await runStripe();
  const made = await stripe.checkout.sessions.create(deposit());
  const declined = await postForm(made.url ?? '', { choice: '4000000000000002' });
  expect(declined.status).toBe(402);
  expect(await declined.text()).toContain('Your card was declined.');
  const between = await stripe.checkout.sessions.retrieve(made.id, { expand: ['payment_intent'] });
  expect(between).toMatchObject({ status: 'open', payment_status: 'unpaid' });
  expect(between.payment_intent).toMatchObject({
    status: 'requires_payment_method',
    last_payment_error: { code: 'card_declined', decline_code: 'generic_decline', type: 'card_error' },
  });
  await postForm(made.url ?? '', { choice: '4242424242424242' });
  const types = (await stripe.events.list({ limit: 50 })).data.map((event) => event.type).reverse();
  expect(types).toEqual([
    'payment_intent.created',
    'charge.failed',
    'payment_intent.payment_failed',
    'charge.succeeded',
    'payment_intent.succeeded',
    'checkout.session.completed',
  ]);
});

test('a card whose bank asks is paid on the second page, or refused there', async () => {
  const { stripe, url } = await runStripe();
  const made = await stripe.checkout.sessions.create(deposit());
  const asked = await postForm(made.url ?? '', { choice: '4000002500003155' });
  expect(asked.headers.get('location')).toBe(`/pay/${made.id}/confirm`);
  expect(await (await fetch(`${made.url}/confirm`)).text()).toContain('Confirm £660.00');
  const refused = await postForm(`${made.url}/confirm`, { answer: 'no' });
  expect(refused.headers.get('location')).toBe(`/pay/${made.id}?refused`);
  expect(await (await fetch(`${url}/pay/${made.id}?refused`)).text()).toContain('was not confirmed');
  await postForm(made.url ?? '', { choice: '4000002500003155' });
  const confirmed = await postForm(`${made.url}/confirm`, { answer: 'yes' });
  expect(confirmed.headers.get('location')).toContain(made.id);
  expect((await stripe.checkout.sessions.retrieve(made.id)).payment_status).toBe('paid');
});

test.each([
  ['settle', 'paid', 'checkout.session.async_payment_succeeded', 'succeeded'],
  ['fail', 'unpaid', 'checkout.session.async_payment_failed', 'requires_payment_method'],
])('a delayed debit completes unpaid and then ends by "%s"', async (act, status, event, intentStatus) => {
  const { stripe, url } = await runStripe();
  const made = await stripe.checkout.sessions.create(deposit());
  await postForm(made.url ?? '', { choice: 'debit' });
  const waiting = await stripe.checkout.sessions.retrieve(made.id, { expand: ['payment_intent'] });
  expect(waiting).toMatchObject({
    status: 'complete',
    payment_status: 'unpaid',
    payment_intent: { status: 'processing' },
  });
  expect((await press(url, act, made.id)).status).toBe(303);
  expect((await press(url, act, made.id)).status).toBe(400);
  const ended = await stripe.checkout.sessions.retrieve(made.id, { expand: ['payment_intent'] });
  expect(ended).toMatchObject({ payment_status: status, payment_intent: { status: intentStatus } });
  const told = await stripe.events.list({ types: ['checkout.session.completed', event] });
  expect(told.data.map((one) => one.type)).toEqual([event, 'checkout.session.completed']);
});

test('a delayed debit arrives by itself when the fake was told after how long', async () => {
  const { stripe, fake } = await runStripe({ settleAfterSeconds: 3600 });
  const made = await stripe.checkout.sessions.create(deposit());
  await postForm(made.url ?? '', { choice: 'debit' });
  fake.faults.set({ advanceSeconds: 3500 });
  expect((await stripe.checkout.sessions.retrieve(made.id)).payment_status).toBe('unpaid');
  fake.faults.set({ advanceSeconds: 3700 });
  expect((await stripe.checkout.sessions.retrieve(made.id)).payment_status).toBe('paid');
});

test('a session ends when its time is over or when it is asked to, and cannot be paid then', async () => {
  const { stripe, url, fake } = await runStripe();
  const early = await stripe.checkout.sessions.create(deposit());
  const late = await stripe.checkout.sessions.create(deposit());
  expect((await stripe.checkout.sessions.expire(early.id)).status).toBe('expired');
  expect(await errorOf(stripe.checkout.sessions.expire(early.id))).toMatchObject({ statusCode: 400 });
  fake.faults.set({ advanceSeconds: 24 * 60 * 60 + 1 });
  const page = await fetch(`${url}/pay/${late.id}`);
  expect(page.status).toBe(410);
  expect(await page.text()).toContain('This payment page has expired');
  const pressed = await postForm(`${url}/pay/${late.id}`, { choice: '4242424242424242' });
  expect(pressed.status).toBe(410);
  expect((await stripe.checkout.sessions.list({ status: 'expired' })).data.map((one) => one.id)).toEqual([
    late.id,
    early.id,
  ]);
  expect((await stripe.events.list({ type: 'checkout.session.expired' })).data).toHaveLength(2);
  expect((await stripe.charges.list()).data).toHaveLength(0);
});

test('what was typed stays when the e-mail address cannot be used, and names are never taken as page text', async () => {
  const { stripe } = await runStripe();
  const nasty = '<b onmouseover="x()">Axe</b>';
  const made = await stripe.checkout.sessions.create(
    deposit({ customer_email: undefined, line_items: [line(nasty, 9_000)] }),
  );
  const answer = await postForm(made.url ?? '', { choice: 'debit', email: 'isolde at example' });
  const page = await answer.text();
  expect(page).toContain('value="isolde at example"');
  expect(page).toMatch(/value="debit" required checked/);
  expect(page).not.toContain(nasty);
});

test('a payment intent outside Checkout can be called off; one inside cannot', async () => {
  const { stripe } = await runStripe();
  const loose = await stripe.paymentIntents.create({ amount: 1_200, currency: 'gbp' });
  expect(await stripe.paymentIntents.cancel(loose.id, { cancellation_reason: 'abandoned' })).toMatchObject({
    status: 'canceled',
    cancellation_reason: 'abandoned',
  });
  expect(await errorOf(stripe.paymentIntents.cancel(loose.id))).toMatchObject({
    code: 'payment_intent_unexpected_state',
  });
  const made = await stripe.checkout.sessions.create(deposit());
  await postForm(made.url ?? '', { choice: '4000000000000002' });
  const intent = String((await stripe.checkout.sessions.retrieve(made.id)).payment_intent);
  expect(await errorOf(stripe.paymentIntents.cancel(intent))).toMatchObject({ statusCode: 400 });
  await stripe.checkout.sessions.expire(made.id);
  expect((await stripe.paymentIntents.retrieve(intent)).status).toBe('canceled');
});

test('only fields that hold an id can be opened', async () => {
  const { stripe } = await runStripe();
  const made = await stripe.checkout.sessions.create(deposit());
  const error = await errorOf(stripe.checkout.sessions.retrieve(made.id, { expand: ['status'] }));
  expect(error).toMatchObject({ statusCode: 400, param: 'expand' });
  const list = await stripe.checkout.sessions.list({ expand: ['data.line_items'] });
  expect(list.data[0]?.line_items?.data[0]?.amount_total).toBe(66_000);
});
