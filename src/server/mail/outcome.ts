import { eq, or } from 'drizzle-orm';
import type { Resend } from 'resend';
import { done, refuse, type Outcome } from '../../commission/problem';
import { mails } from '../db/schema/studio';
import type { Services } from '../services';
import type { MailRow } from './claim';
import { endMail, markDelivered, type MailEnd } from './settle';

/** What the mail service tells of one mail or account, as its SDK declares it. */
export type MailEvent = ReturnType<Resend['webhooks']['verify']>;

/** Checks the signature over the raw body, by the SDK, and returns the event. */
export function verifyMailEvent({ resend, config }: Services, rawBody: string, headers: Headers): Outcome<MailEvent> {
  try {
    const event = resend.webhooks.verify({
      payload: rawBody,
      headers: {
        id: headers.get('svix-id') ?? '',
        timestamp: headers.get('svix-timestamp') ?? '',
        signature: headers.get('svix-signature') ?? '',
      },
      webhookSecret: config.resendWebhookSecret,
    });
    return done(event);
  } catch (error) {
    // Any throw here is about the outside's bytes: a wrong or stale signature, or a body that is not JSON.
    return refuse('invalid', `The event was refused: ${error instanceof Error ? error.message : 'unreadable'}`);
  }
}

/**
 * Takes in one event: a mail's state moves forward, a bounce or complaint lies in the owner's tray once. Events may
 * come twice, in any order, and before our own note that the mail was handed over. Returns what was done.
 */
export async function recordMailEvent(
  services: Services,
  event: MailEvent,
): Promise<'delivered' | 'ended' | 'ignored' | 'unknown'> {
  if (event.type !== 'email.delivered' && !ENDS.includes(event.type)) return 'ignored';
  if (!('data' in event) || !('email_id' in event.data)) return 'ignored';
  const { email_id: providerId } = event.data;
  const tag = 'tags' in event.data ? event.data.tags?.['mail'] : undefined;
  const mail = await findMail(services, providerId, tag);
  if (!mail) return 'unknown';
  const at = new Date(event.created_at);
  if (event.type === 'email.delivered') {
    return (await markDelivered(services.db, mail, providerId, at)) ? 'delivered' : 'ignored';
  }
  const end = endOf(event, at);
  return end && (await endMail(services.db, mail, { ...end, providerId })) ? 'ended' : 'ignored';
}

const ENDS: string[] = ['email.bounced', 'email.complained', 'email.suppressed', 'email.failed'];

function endOf(event: MailEvent, at: Date): MailEnd | null {
  switch (event.type) {
    case 'email.bounced': {
      const bounce = event.data.bounce.type === 'Transient' ? 'transient' : 'permanent';
      return { state: 'bounced', bounce, words: `It came back: ${event.data.bounce.message}`, at };
    }
    case 'email.suppressed': {
      const words = 'The mail service no longer sends to this address: earlier mails to it came back.';
      return { state: 'bounced', bounce: 'permanent', words, at };
    }
    case 'email.complained':
      return { state: 'complained', words: 'The reader reported it as unwanted mail.', at };
    case 'email.failed':
      return { state: 'failed', words: `The mail service could not send it: ${event.data.failed.reason}`, at };
    default:
      return null;
  }
}

async function findMail({ db }: Services, providerId: string, tag: string | undefined): Promise<MailRow | null> {
  const ours = tag !== undefined && /^[0-9a-f-]{36}$/.test(tag);
  const [row] = await db
    .select()
    .from(mails)
    .where(ours ? or(eq(mails.providerId, providerId), eq(mails.id, tag)) : eq(mails.providerId, providerId))
    .limit(1);
  return (row as MailRow | undefined) ?? null;
}
