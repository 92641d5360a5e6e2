import { createHmac, randomBytes, randomUUID } from 'node:crypto';
import type { GetWebhookResponseSuccess, WebhookEvent } from 'resend';
import { z } from 'zod';
import type { Delivery, Parcel } from '../state/deliveries';
import { MailRefusal } from './errors';
import type { World } from './world';

const webhookSchema = z.looseObject({
  endpoint: z.string().refine((text) => /^https?:\/\//.test(text) && URL.canParse(text), 'Give a whole web address.'),
  events: z.array(z.string().min(1)).min(1),
});

/** A new endpoint; its secret is made here. Call inside a write. @throws MailRefusal (422). */
export function createWebhook(world: World, input: unknown) {
  const parsed = webhookSchema.safeParse(input);
  if (!parsed.success) {
    const issue = parsed.error.issues[0];
    throw new MailRefusal(
      422,
      'validation_error',
      `Invalid \`${String(issue?.path[0] ?? 'body')}\` field. ${issue?.message ?? ''}`,
    );
  }
  const id = randomUUID();
  const secret = `whsec_${randomBytes(24).toString('base64')}`;
  put(world, id, parsed.data.endpoint, parsed.data.events as WebhookEvent[], secret);
  return { object: 'webhook' as const, id, signing_secret: secret };
}

function put(world: World, id: string, endpoint: string, events: WebhookEvent[] | null, secret: string): void {
  world.tables.webhooks.put(id, {
    object: 'webhook',
    id,
    created_at: world.now().toISOString(),
    status: 'enabled',
    endpoint,
    events,
    signing_secret: secret,
  });
}

/** The endpoint named at start: keeps its id, so what waited for it goes to the new address. */
export function setStartWebhook(world: World, url: string, secret: string): void {
  world.store.write(() => put(world, 'named-at-start', url, null, secret));
}

/** The endpoint with this id. @throws MailRefusal (404). */
export function webhookOnFile(world: World, id: string): GetWebhookResponseSuccess {
  const webhook = world.tables.webhooks.get(id);
  if (!webhook) throw new MailRefusal(404, 'not_found', 'Webhook not found');
  return webhook;
}

/** Takes an endpoint away. Call inside a write. @throws MailRefusal (404). */
export function removeWebhook(world: World, id: string) {
  webhookOnFile(world, id);
  world.tables.webhooks.remove(id);
  return { object: 'webhook' as const, id, deleted: true };
}

/**
 * Addresses and signs one attempt in the svix manner, which the SDK checks: HMAC-SHA-256 over "id.seconds.body" with
 * the base64 key behind `whsec_`, in base64. Every attempt of a message carries the same id.
 */
export function packMessage(world: World, delivery: Delivery): Parcel | null {
  const webhook = world.tables.webhooks.get(delivery.endpoint);
  const event = world.tables.events.get(delivery.event);
  if (!webhook || !event) return null;
  const body = JSON.stringify(event.payload);
  const seconds = String(Math.floor(Date.now() / 1000));
  const key = Buffer.from(webhook.signing_secret.replace(/^whsec_/, ''), 'base64');
  const signature = createHmac('sha256', key).update(`${event.id}.${seconds}.${body}`).digest('base64');
  const headers = {
    'content-type': 'application/json',
    'svix-id': event.id,
    'svix-timestamp': seconds,
    'svix-signature': `v1,${signature}`,
  };
  return { url: webhook.endpoint, headers, body };
}
