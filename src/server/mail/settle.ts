import { and, eq, inArray } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import type { Db } from '../db/client';
import { tray } from '../db/schema/commissions';
import { mails } from '../db/schema/studio';
import type { MailRow } from './claim';

type Settled = Pick<MailRow, 'id' | 'letter' | 'to' | 'commissionId'>;

/** What is left of a sign-in letter once it needs no more tries: nothing that could sign anybody in. */
function forget(mail: Pick<MailRow, 'letter'>) {
  return mail.letter === 'M0' ? { data: {}, html: null, text: null } : {};
}

/** Notes that the mail service has the mail. News of its delivery that came first is left standing. */
export async function markSent(db: Db, mail: Settled, providerId: string | null, at: Date): Promise<void> {
  await db
    .update(mails)
    .set({ ...forget(mail), sentAt: at, ...(providerId ? { providerId } : {}) })
    .where(eq(mails.id, mail.id));
  await db
    .update(mails)
    .set({ state: 'sent', lastError: null })
    .where(and(eq(mails.id, mail.id), eq(mails.state, 'queued')));
}

/** Notes that the mail reached its mailbox; false when it was known, or came to nothing since. */
export async function markDelivered(db: Db, mail: Settled, providerId: string, at: Date): Promise<boolean> {
  const delivered = await db
    .update(mails)
    .set({ ...forget(mail), state: 'delivered', providerId, settledAt: at, lastError: null })
    .where(and(eq(mails.id, mail.id), inArray(mails.state, ['queued', 'sent'])))
    .returning({ id: mails.id });
  return delivered.length > 0;
}

/** Notes why a try failed; the mail stays queued. */
export async function markTried(db: Db, mailId: string, words: string): Promise<void> {
  await db
    .update(mails)
    .set({ lastError: words })
    .where(and(eq(mails.id, mailId), eq(mails.state, 'queued')));
}

/** How a mail came to nothing. */
export interface MailEnd {
  state: 'failed' | 'bounced' | 'complained';
  words: string;
  bounce?: 'permanent' | 'transient';
  providerId?: string;
  at: Date;
}

const NOT_YET: Record<MailEnd['state'], MailRow['state'][]> = {
  failed: ['queued', 'sent'],
  bounced: ['queued', 'sent', 'delivered', 'failed'],
  complained: ['queued', 'sent', 'delivered'],
};

/**
 * Ends a mail that reached nobody and lays it in the owner's tray, both once: an end that is told again
 * changes nothing. `quiet` leaves the tray alone where there is nothing for the owner to do.
 */
export async function endMail(db: Db, mail: Settled, end: MailEnd, quiet = false): Promise<boolean> {
  return db.transaction(async (tx) => {
    const ended = await tx
      .update(mails)
      .set({
        ...forget(mail),
        state: end.state,
        lastError: end.words,
        settledAt: end.at,
        bounce: end.bounce ?? null,
        ...(end.providerId ? { providerId: end.providerId } : {}),
      })
      .where(and(eq(mails.id, mail.id), inArray(mails.state, NOT_YET[end.state])))
      .returning({ id: mails.id });
    if (ended.length === 0) return false;
    if (!quiet) {
      await tx.insert(tray).values({
        id: uuidv7(),
        commissionId: mail.commissionId,
        problem: { code: 'unavailable', message: trayMessage(mail, end) },
        data: { mailId: mail.id, letter: mail.letter, to: mail.to, state: end.state },
        createdAt: end.at,
      });
    }
    return true;
  });
}

function trayMessage(mail: Settled, end: MailEnd): string {
  const advice =
    end.state === 'complained'
      ? 'Ring the customer before you write again.'
      : 'Check the address with the customer by phone, then send it again from the mail page.';
  return `A mail to ${mail.to} did not arrive. ${end.words} ${advice}`;
}
