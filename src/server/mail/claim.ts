import { and, desc, eq, gt, inArray, isNotNull, ne, sql } from 'drizzle-orm';
import type { Db } from '../db/client';
import { mails } from '../db/schema/studio';
import { parseLetterData } from './letter-data';
import { LETTER_IDS, type LetterId } from './letter-ids';

export type MailRow = typeof mails.$inferSelect & { letter: LetterId };

/** The row when it still waits to be sent; null when it was sent, given up or merged meanwhile. */
export async function readQueued(db: Db, mailId: string): Promise<MailRow | null> {
  const [row] = await db
    .select()
    .from(mails)
    .where(and(eq(mails.id, mailId), eq(mails.state, 'queued')));
  if (!row) return null;
  const letter = LETTER_IDS.find((id) => id === row.letter);
  if (!letter) throw new Error(`mail ${mailId} asks for letter ${row.letter}, which does not exist`);
  return { ...row, letter };
}

/** Counts one more try, unless the mail stopped waiting since it was read. */
export async function countTry(db: Db, mailId: string): Promise<boolean> {
  const counted = await db
    .update(mails)
    .set({ tries: sql`${mails.tries} + 1` })
    .where(and(eq(mails.id, mailId), eq(mails.state, 'queued')))
    .returning({ id: mails.id });
  return counted.length > 0;
}

/**
 * True when the last thing heard of this address was that it takes no mail from us: a lasting bounce, or
 * a complaint. A later delivery (the owner pressed "Send again") lifts it.
 */
export async function takesNoMail(db: Db, address: string): Promise<boolean> {
  const [last] = await db
    .select({ state: mails.state, bounce: mails.bounce })
    .from(mails)
    .where(
      and(
        sql`lower(${mails.to}) = lower(${address})`,
        inArray(mails.state, ['delivered', 'bounced', 'complained']),
        isNotNull(mails.providerId),
      ),
    )
    .orderBy(desc(mails.settledAt))
    .limit(1);
  return last?.state === 'complained' || (last?.state === 'bounced' && last.bounce === 'permanent');
}

/** When the last progress mail of this commission left, if it left after `since`. */
export async function lastProgress(db: Db, commissionId: string, since: Date): Promise<Date | null> {
  const [last] = await db
    .select({ sentAt: mails.sentAt })
    .from(mails)
    .where(and(eq(mails.commissionId, commissionId), eq(mails.letter, 'M19'), gt(mails.sentAt, since)))
    .orderBy(desc(mails.sentAt))
    .limit(1);
  return last?.sentAt ?? null;
}

const MOST_PICTURES = 3;

/**
 * Lets the newest waiting progress mail of a commission tell what the others would have told: it takes their
 * pictures, three at most, and they become `merged`. Returns false when `mail` is one of the others.
 */
export async function mergeProgress(db: Db, mail: MailRow, now: Date): Promise<boolean> {
  return db.transaction(async (tx) => {
    const waiting = await tx
      .select({ id: mails.id, data: mails.data })
      .from(mails)
      .where(and(eq(mails.commissionId, mail.commissionId ?? ''), eq(mails.letter, 'M19'), eq(mails.state, 'queued')))
      .orderBy(desc(mails.createdAt), desc(mails.id))
      .for('update');
    const [newest, ...older] = waiting;
    if (!newest || older.length === 0) return newest?.id === mail.id;
    const told = waiting.map((row) => parseLetterData('M19', row.data));
    const pictures = told.flatMap((data) => data.pictures).slice(0, MOST_PICTURES);
    await tx
      .update(mails)
      .set({ data: { ...newest.data, pictures } })
      .where(eq(mails.id, newest.id));
    await tx
      .update(mails)
      .set({ state: 'merged', settledAt: now })
      .where(
        and(
          inArray(
            mails.id,
            older.map((row) => row.id),
          ),
          ne(mails.id, newest.id),
        ),
      );
    return newest.id === mail.id;
  });
}
