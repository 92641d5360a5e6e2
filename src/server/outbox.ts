import { sql } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import type { Db } from './db/client';
import { mails } from './db/schema/studio';
import { parseLetterData, type LetterData } from './mail/letter-data';
import type { LetterId } from './mail/letter-ids';

interface Queued<L extends LetterId> {
  letter: L;
  to: string;
  cause: string;
  commissionId?: string;
  data: LetterData[L];
  at: Date;
}

/**
 * A mail to be sent once its cause is committed. `cause` makes it unique: "M12:<ledger entry id>".
 * `data` is what that letter needs, as `mail/letter-data` tells.
 */
export type NewMail = { [L in LetterId]: Queued<L> }[LetterId];

/**
 * Writes the outbox row and its job in the caller's transaction: rolled back, neither was ever there.
 * A second row for the same cause is left out. Returns the row's id, or null when it was there already.
 * Throws when `data` is not what the letter needs: a bug of the caller, told before anything is written.
 */
export async function queueMail(db: Db, mail: NewMail): Promise<string | null> {
  const [row] = await db
    .insert(mails)
    .values({
      id: uuidv7(),
      letter: mail.letter,
      to: mail.to,
      cause: mail.cause,
      commissionId: mail.commissionId ?? null,
      data: parseLetterData(mail.letter, mail.data),
      createdAt: mail.at,
    })
    .onConflictDoNothing({ target: mails.cause })
    .returning({ id: mails.id });
  if (!row) return null;
  await queueJob(db, 'send-mail', { mailId: row.id }, `mail:${row.id}`);
  return row.id;
}

/**
 * Adds a job in the caller's transaction, to be run at once or at `runAt`. Jobs of one `key` are merged
 * while they wait; one that is running already lets a second one through.
 */
export async function queueJob(
  db: Db,
  task: string,
  payload: Record<string, string>,
  key: string,
  runAt: Date | null = null,
): Promise<void> {
  await db.execute(
    sql`select graphile_worker.add_job(${task}::text, payload := ${JSON.stringify(payload)}::json, job_key := ${key}::text, run_at := ${runAt?.toISOString() ?? null}::timestamptz, max_attempts := 20)`,
  );
}
