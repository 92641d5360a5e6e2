import { and, count, desc, eq, inArray, lt, type SQL } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { z } from 'zod';
import { may, type Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { commissions } from '../db/schema/commissions';
import { mails, mailState } from '../db/schema/studio';
import { recordEvent } from '../history';
import { LETTER_NAMES, type LetterId } from './letter-ids';
import { queueJob } from '../outbox';
import type { Services } from '../services';

export type MailState = (typeof mailState.enumValues)[number];

/** Each state in the owner's words. */
export const MAIL_WORDS: Record<MailState, string> = {
  queued: 'Waiting',
  sent: 'Sent',
  delivered: 'Delivered',
  bounced: 'Came back',
  complained: 'Reported as unwanted',
  failed: 'Not sent',
  merged: 'Told in a later mail',
};

const PAGE = 50;
const FOR_OWNER = 'The mail log is for the owner.';

/** Which mails to list; anything that does not fit is left out, as if it had not been asked. */
export const mailLogSchema = z.object({
  commission: z
    .string()
    .trim()
    .toUpperCase()
    .regex(/^[A-Z]{1,4}-\d{3,6}$/)
    .optional()
    .catch(undefined),
  state: z.enum(mailState.enumValues).optional().catch(undefined),
  /** Id of the last mail of the page before. */
  before: z.uuid().optional().catch(undefined),
});

/** One line of the log. Instants are ISO strings; `again` counts the times it was repeated before. */
export interface MailLine {
  id: string;
  letter: string;
  subject: string | null;
  to: string;
  ref: string | null;
  state: MailState;
  createdAt: string;
  sentAt: string | null;
  waitsUntil: string | null;
  tries: number;
  lastError: string | null;
  mayRepeat: boolean;
  again: number;
}

/** The mails of the outbox, newest first, fifty at a time; `older` is where the next page starts. */
export async function listMails(
  services: Services,
  actor: Actor,
  asked: z.output<typeof mailLogSchema>,
): Promise<Outcome<{ mails: MailLine[]; older: string | null }>> {
  if (!may(actor, 'mail:read')) return refuse(actor ? 'not-allowed' : 'sign-in-needed', FOR_OWNER);
  const wanted: (SQL | undefined)[] = [
    asked.commission ? eq(commissions.ref, asked.commission) : undefined,
    asked.state ? eq(mails.state, asked.state) : undefined,
    asked.before ? lt(mails.id, asked.before) : undefined,
  ];
  const rows = await services.db
    .select({ mail: mails, ref: commissions.ref })
    .from(mails)
    .leftJoin(commissions, eq(commissions.id, mails.commissionId))
    .where(and(...wanted))
    .orderBy(desc(mails.id))
    .limit(PAGE + 1);
  const shown = rows.slice(0, PAGE);
  const repeats = await countRepeats(
    services,
    shown.map(({ mail }) => mail.id),
  );
  const lines = shown.map(({ mail, ref }) => lineOf(mail, ref, repeats.get(mail.id) ?? 0, services.now()));
  return done({ mails: lines, older: rows.length > PAGE ? (shown.at(-1)?.mail.id ?? null) : null });
}

function lineOf(mail: typeof mails.$inferSelect, ref: string | null, again: number, now: Date): MailLine {
  const waits = mail.state === 'queued' && mail.notBefore !== null && mail.notBefore > now;
  return {
    id: mail.id,
    letter: LETTER_NAMES[mail.letter as LetterId] ?? mail.letter,
    subject: mail.subject,
    to: mail.to,
    ref,
    state: mail.state,
    createdAt: mail.createdAt.toISOString(),
    sentAt: mail.sentAt?.toISOString() ?? null,
    waitsUntil: waits ? (mail.notBefore?.toISOString() ?? null) : null,
    tries: mail.tries,
    lastError: mail.lastError,
    mayRepeat: mayRepeat(mail),
    again,
  };
}

function mayRepeat(mail: Pick<typeof mails.$inferSelect, 'letter' | 'state'>): boolean {
  return mail.letter !== 'M0' && mail.state !== 'queued' && mail.state !== 'merged';
}

async function countRepeats({ db }: Pick<Services, 'db'>, ids: string[]): Promise<Map<string, number>> {
  const rows = await db
    .select({ id: mails.againOf, times: count() })
    .from(mails)
    .where(inArray(mails.againOf, ids))
    .groupBy(mails.againOf);
  return new Map(rows.map((row) => [row.id ?? '', row.times]));
}

/** `again` is how often the page said the mail had been repeated: two presses of one page are one repeat. */
export const sendAgainSchema = z.object({ again: z.coerce.number().int().min(0).max(1000) });

/**
 * Sends a mail once more as a new one, word for word, also to an address whose mails came back. The same press
 * twice makes one mail.
 */
export async function sendMailAgain(
  services: Services,
  actor: Actor,
  id: string | undefined,
  { again }: z.output<typeof sendAgainSchema>,
): Promise<Outcome<{ id: string }>> {
  if (!may(actor, 'mail:read')) return refuse(actor ? 'not-allowed' : 'sign-in-needed', FOR_OWNER);
  const [mail] =
    id && z.uuid().safeParse(id).success ? await services.db.select().from(mails).where(eq(mails.id, id)) : [];
  if (!mail) return refuse('not-found', 'There is no such mail.');
  if (!mayRepeat(mail)) return refuse('conflict', whyNot(mail));
  const cause = `${mail.cause}:again:${again + 1}`;
  const at = services.now();
  return services.db.transaction(async (tx) => {
    const { letter, to, commissionId, data, subject, html, text } = mail;
    const [row] = await tx
      .insert(mails)
      .values({
        id: uuidv7(),
        letter,
        to,
        commissionId,
        data,
        subject,
        html,
        text,
        cause,
        againOf: mail.id,
        createdAt: at,
      })
      .onConflictDoNothing({ target: mails.cause })
      .returning({ id: mails.id });
    if (!row) {
      const [first] = await tx.select({ id: mails.id }).from(mails).where(eq(mails.cause, cause));
      return done({ id: first?.id ?? mail.id });
    }
    await queueJob(tx, 'send-mail', { mailId: row.id }, `mail:${row.id}`);
    if (commissionId) {
      const sentence = `The mail “${subject ?? LETTER_NAMES[letter as LetterId]}” was sent again.`;
      await recordEvent(tx, {
        commissionId,
        code: 'mail-again',
        actor,
        sentence,
        data: { mailId: row.id, of: mail.id },
        at,
      });
    }
    return done({ id: row.id });
  });
}

function whyNot(mail: Pick<typeof mails.$inferSelect, 'letter' | 'state'>): string {
  if (mail.letter === 'M0')
    return 'A sign-in mail is good once. Ask the person to sign in again; that sends a fresh one.';
  if (mail.state === 'queued') return 'This mail has not been sent yet and still waits; it goes by itself.';
  return 'What this mail said was told in a later one. Send that one again instead.';
}
