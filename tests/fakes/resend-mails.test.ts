// Judge: the official SDK (resend 6.38.0) and its types; errors as in Resend's documentation page on errors.
import { Resend } from 'resend';
import { expect, test } from 'vitest';
import { control, freshFolder, runResend } from './rig';

const quote = {
  from: 'Marrowfen Casting House <studio@example.org>',
  to: 'isolde@example.org',
  subject: 'Your quote, revision 2',
  html: '<p>Your quote is <a href="http://localhost:4321/q/2">ready</a>.</p>',
  text: 'Your quote is ready: http://localhost:4321/q/2',
};

test('a mail is sent, delivered and can be read back', async () => {
  const { resend } = await runResend();
  const sent = await resend.emails.send({
    ...quote,
    cc: ['wren@example.org'],
    replyTo: 'wren@example.org',
    tags: [{ name: 'letter', value: 'M14' }],
    headers: { 'X-Commission': 'MF-0181' },
  });
  expect(sent.error).toBeNull();
  const { data } = await resend.emails.get(sent.data?.id ?? '');
  expect(data).toMatchObject({
    object: 'email',
    id: sent.data?.id,
    from: quote.from,
    to: ['isolde@example.org'],
    cc: ['wren@example.org'],
    bcc: null,
    reply_to: ['wren@example.org'],
    subject: quote.subject,
    html: quote.html,
    text: quote.text,
    last_event: 'delivered',
    tags: [{ name: 'letter', value: 'M14' }],
  });
});

test.each([
  ['bounce@example.org', 'bounced'],
  ['Somebody <bounced+2@example.org>', 'bounced'],
  ['complained@example.org', 'complained'],
  ['suppressed@example.org', 'suppressed'],
  ['bob@example.org', 'delivered'],
])('a mail to %s ends as %s', async (to, ending) => {
  const { resend } = await runResend();
  const sent = await resend.emails.send({ ...quote, to });
  expect((await resend.emails.get(sent.data?.id ?? '')).data?.last_event).toBe(ending);
});

test('lists come newest first and are cut by after and before', async () => {
  const { resend } = await runResend();
  const ids: string[] = [];
  for (let count = 0; count < 5; count += 1) ids.unshift((await resend.emails.send(quote)).data?.id ?? '');
  const first = (await resend.emails.list({ limit: 2 })).data;
  expect(first).toMatchObject({ object: 'list', has_more: true });
  expect(first?.data.map((mail) => mail.id)).toEqual(ids.slice(0, 2));
  expect(first?.data[0]).not.toHaveProperty('html');
  const rest = (await resend.emails.list({ limit: 3, after: ids[1] ?? '' })).data;
  expect(rest?.data.map((mail) => mail.id)).toEqual(ids.slice(2));
  expect(rest?.has_more).toBe(false);
  const back = (await resend.emails.list({ limit: 2, before: ids[3] ?? '' })).data;
  expect(back?.data.map((mail) => mail.id)).toEqual(ids.slice(1, 3));
  expect((await resend.emails.list({ limit: 101 })).error?.name).toBe('validation_error');
});

test('a batch is all or nothing, or says which it left out', async () => {
  const { resend } = await runResend();
  const both = await resend.batch.send([quote, { ...quote, to: 'rafe@example.org' }]);
  expect(both.data?.data).toHaveLength(2);
  const bad = { ...quote, to: 'nobody' };
  const none = await resend.batch.send([quote, bad]);
  expect(none.error).toMatchObject({ statusCode: 422, name: 'validation_error' });
  expect((await resend.emails.list()).data?.data).toHaveLength(2);
  const some = await resend.batch.send([bad, quote], { batchValidation: 'permissive' });
  expect(some.data?.data).toHaveLength(1);
  expect(some.data?.errors.map((one) => one.index)).toEqual([0]);
  const key = { idempotencyKey: 'batch-of-the-day' };
  const once = await resend.batch.send([quote], key);
  expect((await resend.batch.send([quote], key)).data?.data).toEqual(once.data?.data);
});

test.each([
  ['no sender', { from: '' }, 'missing_required_field', 422],
  ['a sender without an address', { from: 'Marrowfen' }, 'validation_error', 422],
  ['a receiver without an address', { to: 'isolde at example.org' }, 'validation_error', 422],
  ['51 receivers', { to: Array<string>(51).fill('a@example.org') }, 'validation_error', 422],
  ['no subject', { subject: undefined as unknown as string }, 'missing_required_field', 422],
  ['no body', { html: undefined, text: undefined as unknown as string }, 'missing_required_field', 422],
  ['a tag with a space', { tags: [{ name: 'a letter', value: 'M14' }] }, 'validation_error', 422],
])('%s is refused', async (_, change, name, statusCode) => {
  const { resend } = await runResend();
  const { data, error } = await resend.emails.send({ ...quote, ...change });
  expect(data).toBeNull();
  expect(error).toMatchObject({ name, statusCode });
  expect((await resend.emails.list()).data?.data).toEqual([]);
});

test('a missing or other key is refused, an unknown mail is not found', async () => {
  const { resend, url } = await runResend();
  const other = new Resend('re_another', { baseUrl: url });
  expect((await other.emails.send(quote)).error).toMatchObject({ statusCode: 401, name: 'validation_error' });
  expect((await other.emails.list()).error).toMatchObject({ statusCode: 400, name: 'validation_error' });
  const bare = await fetch(`${url}/emails`);
  expect(bare.status).toBe(401);
  expect(await bare.json()).toMatchObject({ name: 'missing_api_key' });
  expect((await resend.emails.get('00000000-0000-4000-8000-000000000000')).error).toMatchObject({
    statusCode: 404,
    name: 'not_found',
  });
});

test('one key sends one mail, also after a restart; another payload under it is refused', async () => {
  const stateFile = `${freshFolder()}/resend.jsonl`;
  const first = await runResend({ stateFile });
  const key = { idempotencyKey: 'outbox-row-17' };
  const sent = await first.resend.emails.send(quote, key);
  expect((await first.resend.emails.send(quote, key)).data).toEqual(sent.data);
  const other = await first.resend.emails.send({ ...quote, subject: 'Revision 3' }, key);
  expect(other.error).toMatchObject({ statusCode: 409, name: 'invalid_idempotent_request' });
  const long = await first.resend.emails.send(quote, { idempotencyKey: 'k'.repeat(257) });
  expect(long.error).toMatchObject({ statusCode: 400, name: 'invalid_idempotency_key' });
  await first.close();
  const second = await runResend({ stateFile });
  expect((await second.resend.emails.send(quote, key)).data).toEqual(sent.data);
  expect((await second.resend.emails.list()).data?.data).toHaveLength(1);
});

test('faults: in progress, too many, failing, answer lost', async () => {
  const { resend, url } = await runResend();
  await control(url, { delayMs: 150 });
  const send = () => resend.emails.send(quote, { idempotencyKey: 'both' });
  const both = await Promise.all([send(), send()]);
  const lost = both.find((one) => one.error !== null);
  expect(lost?.error).toMatchObject({ statusCode: 409, name: 'concurrent_idempotent_requests' });
  await control(url, { delayMs: 0, errors: { times: 1, status: 429, retryAfterSeconds: 7 } });
  const limited = await resend.emails.send(quote);
  expect(limited.error).toMatchObject({ statusCode: 429, name: 'rate_limit_exceeded' });
  expect(limited.headers?.['retry-after']).toBe('7');
  await control(url, { errors: { times: 1, status: 500 } });
  expect((await resend.emails.send(quote)).error).toMatchObject({ statusCode: 500, name: 'internal_server_error' });
  await control(url, { dropAnswers: 1 });
  const key = { idempotencyKey: 'dropped' };
  expect((await resend.emails.send(quote, key)).error).toMatchObject({ name: 'application_error', statusCode: null });
  expect((await resend.emails.send(quote, key)).error).toBeNull();
  expect((await resend.emails.list()).data?.data).toHaveLength(2);
});
