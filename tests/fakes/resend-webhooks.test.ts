// Judge: `resend.webhooks.verify` of the official SDK (resend 6.38.0), which checks svix signatures.
import type { WebhookEventPayload } from 'resend';
import { expect, test } from 'vitest';
import { MAIL_SECRET, freshFolder, runReceiver, runResend, type Received } from './rig';
import { Resend } from 'resend';

const judge = new Resend('re_pourwright');
const letter = { from: 'studio@example.org', subject: 'Second pour sound', text: 'It filled cleanly.' };

function read({ headers, body }: Received, webhookSecret = MAIL_SECRET): WebhookEventPayload {
  const named = {
    id: String(headers['svix-id']),
    timestamp: String(headers['svix-timestamp']),
    signature: String(headers['svix-signature']),
  };
  return judge.webhooks.verify({ payload: body, headers: named, webhookSecret });
}

function typesOf(all: Received[]): string[] {
  return all.map((one) => read(one).type).sort();
}

test('sent and delivered are told, signed so that the SDK believes it', async () => {
  const receiver = await runReceiver();
  const { resend } = await runResend({ webhook: { url: receiver.url, secret: MAIL_SECRET } });
  const tags = [{ name: 'letter', value: 'M13' }];
  const sent = await resend.emails.send({ ...letter, to: 'isolde@example.org', tags });
  const all = await receiver.until(2);
  expect(typesOf(all)).toEqual(['email.delivered', 'email.sent']);
  expect(read(all[0] as Received).data).toMatchObject({
    email_id: sent.data?.id,
    to: ['isolde@example.org'],
    subject: letter.subject,
    tags: { letter: 'M13' },
  });
});

test('a bounce says that it is permanent', async () => {
  const receiver = await runReceiver();
  const { resend } = await runResend({ webhook: { url: receiver.url, secret: MAIL_SECRET } });
  await resend.emails.send({ ...letter, to: 'bounce@example.org' });
  const told = (await receiver.until(2)).map((one) => read(one)).find((event) => event.type === 'email.bounced');
  if (told?.type !== 'email.bounced') throw new Error('no bounce was told');
  expect(told.data.bounce.type).toBe('Permanent');
});

test('a changed body or another secret is not believed', async () => {
  const receiver = await runReceiver();
  const { resend } = await runResend({ webhook: { url: receiver.url, secret: MAIL_SECRET } });
  await resend.emails.send({ ...letter, to: 'isolde@example.org' });
  const received = (await receiver.until(1))[0] as Received;
  expect(() => read({ ...received, body: received.body.replace('isolde', 'rafe') })).toThrow(
    'No matching signature found',
  );
  expect(() => read(received, `whsec_${Buffer.from('another key').toString('base64')}`)).toThrow();
});

test('a message keeps its id through every attempt and a restart of the fake', async () => {
  const stateFile = `${freshFolder()}/resend.jsonl`;
  const failing = await runReceiver(() => 503);
  const first = await runResend({ stateFile, webhook: { url: failing.url, secret: MAIL_SECRET } });
  await first.resend.emails.send({ ...letter, to: 'isolde@example.org' });
  const tried = await failing.until(4);
  await first.close();
  const receiver = await runReceiver();
  await runResend({ stateFile, webhook: { url: receiver.url, secret: MAIL_SECRET } });
  const taken = await receiver.until(2);
  const ids = (all: Received[]): Set<string> => new Set(all.map((one) => String(one.headers['svix-id'])));
  expect(ids(taken).size).toBe(2);
  for (const id of ids(tried)) expect(ids(taken)).toContain(id);
});

test('endpoints made by the API get what they asked for, with their own secret', async () => {
  const receiver = await runReceiver();
  const { resend, fake } = await runResend();
  const made = await resend.webhooks.create({ endpoint: receiver.url, events: ['email.bounced'] });
  const secret = made.data?.signing_secret ?? '';
  await resend.emails.send({ ...letter, to: ['bounce@example.org'] });
  const all = await receiver.until(1);
  expect(read(all[0] as Received, secret).type).toBe('email.bounced');
  expect((await resend.webhooks.get(made.data?.id ?? '')).data).toMatchObject({
    endpoint: receiver.url,
    signing_secret: secret,
  });
  expect((await resend.webhooks.list()).data?.data.map((one) => one.id)).toEqual([made.data?.id]);
  expect((await resend.webhooks.remove(made.data?.id ?? '')).data?.deleted).toBe(true);
  await resend.emails.send({ ...letter, to: ['bounce@example.org'] });
  await fake.webhooksSettled();
  expect(receiver.all).toHaveLength(1);
});
