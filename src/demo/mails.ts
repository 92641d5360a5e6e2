import { addSeconds } from 'date-fns';
import { asc, eq, sql } from 'drizzle-orm';
import { mails } from '../server/db/schema/studio';
import { readQueued } from '../server/mail/claim';
import { parseLetterData } from '../server/mail/letter-data';
import { frameFor, picturesOf, renderLetter } from '../server/mail/render';
import { readStudioFacts } from '../server/mail/studio-facts';
import type { Services } from '../server/services';

const SENT_AFTER_SECONDS = 20;
const DELIVERED_AFTER_SECONDS = 24;

/**
 * Settles the mails of the demo's past: each is written as it would have gone out and stands as delivered, and its job
 * goes. So the inbox begins with what the visitor does, and the owner's list of mails is full all the same.
 */
export async function settleMails({ db, config }: Services): Promise<void> {
  const studio = await readStudioFacts(db);
  const rows = await db.select({ id: mails.id }).from(mails).where(eq(mails.state, 'queued')).orderBy(asc(mails.id));
  for (const [index, { id }] of rows.entries()) {
    const mail = await readQueued(db, id);
    if (!mail) continue;
    const data = parseLetterData(mail.letter, mail.data);
    const enclosed = picturesOf(data).map((picture) => picture.photoId);
    const letter = await renderLetter(mail.letter, data, frameFor(config, studio, enclosed));
    await db
      .update(mails)
      .set({
        ...letter,
        state: 'delivered',
        providerId: `demo-${String(index + 1).padStart(4, '0')}`,
        tries: 1,
        sentAt: addSeconds(mail.createdAt, SENT_AFTER_SECONDS),
        settledAt: addSeconds(mail.createdAt, DELIVERED_AFTER_SECONDS),
      })
      .where(eq(mails.id, mail.id));
    await db.execute(sql`select graphile_worker.remove_job(${`mail:${mail.id}`}::text)`);
  }
}
