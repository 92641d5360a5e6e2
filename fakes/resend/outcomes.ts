import type { EmailBouncedEvent, EmailDeliveredEvent, WebhookEventPayload } from 'resend';
import { freshId } from '../state/ids';
import { bareAddress } from './mail-params';
import type { Mail, World } from './world';

type Ending = 'email.sent' | 'email.delivered' | 'email.bounced' | 'email.complained' | 'email.suppressed';

const LAST: Record<Ending, Mail['last_event']> = {
  'email.sent': 'sent',
  'email.delivered': 'delivered',
  'email.bounced': 'bounced',
  'email.complained': 'complained',
  'email.suppressed': 'suppressed',
};

/** What the receiving side does, by how an address begins. */
const MAGIC: [start: string, endings: Ending[]][] = [
  ['bounce', ['email.bounced']],
  ['complain', ['email.delivered', 'email.complained']],
  ['suppress', ['email.suppressed']],
];

/** Writes down what became of a mail and queues a webhook for each endpoint that listens. Call inside a write. */
export function recordEvent(world: World, mailId: string, type: Ending): void {
  const mail = world.tables.mails.get(mailId);
  if (!mail) return;
  const at = world.now().toISOString();
  const history = [...mail.history, { event: type, at }];
  world.tables.mails.put(mailId, { ...mail, last_event: LAST[type], history });
  const id = freshId('msg_', 27);
  world.tables.events.put(id, { id, payload: payloadOf(mail, type, at) });
  for (const webhook of world.tables.webhooks.all()) {
    if (webhook.events && !webhook.events.includes(type)) continue;
    for (let copy = 0; copy < world.faults.webhookCopies; copy += 1) world.deliveries.add(id, webhook.id);
  }
}

function payloadOf(mail: Mail, type: Ending, at: string): WebhookEventPayload {
  const data = {
    created_at: mail.created_at,
    email_id: mail.id,
    message_id: mail.message_id,
    from: mail.from,
    to: mail.to,
    subject: mail.subject,
    ...(mail.tags ? { tags: Object.fromEntries(mail.tags.map((tag) => [tag.name, tag.value])) } : {}),
  } satisfies EmailDeliveredEvent['data'];
  if (type === 'email.bounced') {
    const bounce = {
      message: 'There is no such mailbox at the receiving side.',
      subType: 'General',
      type: 'Permanent',
    };
    return { type, created_at: at, data: { ...data, bounce } } satisfies EmailBouncedEvent;
  }
  if (type === 'email.suppressed') {
    const suppressed = {
      message: 'The address bounced before and is on the suppression list.',
      type: 'OnAccountSuppressionList',
    };
    return { type, created_at: at, data: { ...data, suppressed } };
  }
  return { type, created_at: at, data };
}

/** Lets the receiving side answer every mail whose time has come. */
export function passTime(world: World): void {
  const now = world.now().getTime();
  const due = world.tables.mails.all().filter((mail) => mail.outcomeAt !== null && mail.outcomeAt <= now);
  if (due.length === 0) return;
  world.store.write(() => {
    for (const mail of due) {
      world.tables.mails.put(mail.id, { ...mail, outcomeAt: null });
      for (const ending of endingsOf(mail)) recordEvent(world, mail.id, ending);
    }
  });
  world.deliveries.wake();
}

function endingsOf(mail: Mail): Ending[] {
  const everybody = [...mail.to, ...(mail.cc ?? []), ...(mail.bcc ?? [])].map(
    (one) => bareAddress(one)?.toLowerCase() ?? '',
  );
  const magic = MAGIC.find(([start]) => everybody.some((one) => one.startsWith(start)));
  return magic?.[1] ?? ['email.delivered'];
}
