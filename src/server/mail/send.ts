import { addDays, addMinutes, addSeconds } from 'date-fns';
import { eq } from 'drizzle-orm';
import type { CreateEmailOptions } from 'resend';
import { mails } from '../db/schema/studio';
import { queueJob } from '../outbox';
import type { Services } from '../services';
import { countTry, lastProgress, mergeProgress, readQueued, takesNoMail, type MailRow } from './claim';
import { findSentMail } from './find-sent';
import { parseLetterData } from './letter-data';
import { readPictures } from './pictures';
import { quietUntil } from './quiet-hours';
import { frameFor, picturesOf, renderLetter } from './render';
import { GIVE_UP_AFTER_MS, judgeRefusal, KEY_KEPT_MS, refusalInWords, secondsToNextTry } from './retry';
import { endMail, markSent, markTried } from './settle';
import { readStudioFacts, type StudioFacts } from './studio-facts';

const ANSWER_WITHIN_MS = 30_000;

/**
 * Sends one mail of the outbox, or puts it off. Safe to run twice, at once or after a crash at any point: the
 * row's id is the idempotency key, and once the mail service has forgotten keys it is asked first.
 *
 * @throws only for bugs and a missing database; a refusal is noted in the row and the next try is queued
 */
export async function sendMail(services: Services, mailId: string): Promise<void> {
  const { db, log } = services;
  const mail = await readQueued(db, mailId);
  if (!mail) return;
  const studio = await readStudioFacts(db);
  const later = await waitsUntil(services, mail, studio);
  if (later === 'told-elsewhere') return;
  if (later) return putOff(services, mail, later);
  if (await isPointless(services, mail)) return;
  if (!(await countTry(db, mail.id))) return;
  try {
    await handOver(services, { ...mail, tries: mail.tries + 1 }, studio);
  } catch (error) {
    const words = error instanceof Error ? error.message : 'An unknown fault.';
    log.error({ err: error, mailId, letter: mail.letter }, 'a mail could not be written or handed over');
    await markTried(db, mail.id, `Our own program could not send it: ${words}`);
    throw error;
  }
}

async function waitsUntil(
  services: Services,
  mail: MailRow,
  studio: StudioFacts,
): Promise<Date | 'told-elsewhere' | null> {
  const now = services.now();
  const morning = quietUntil(mail.letter, now, studio.quietHours, studio.timeZone);
  if (mail.letter !== 'M19' || !mail.commissionId || studio.progressEveryDays === null) return morning;
  if (!(await mergeProgress(services.db, mail, now))) return 'told-elsewhere';
  const last = await lastProgress(services.db, mail.commissionId, addDays(now, -studio.progressEveryDays));
  const due = last ? addDays(last, studio.progressEveryDays) : now;
  if (due <= now) return morning;
  return quietUntil(mail.letter, due, studio.quietHours, studio.timeZone) ?? due;
}

async function putOff(services: Services, mail: MailRow, until: Date): Promise<void> {
  await services.db.transaction(async (tx) => {
    await tx.update(mails).set({ notBefore: until }).where(eq(mails.id, mail.id));
    await queueJob(tx, 'send-mail', { mailId: mail.id }, `mail:${mail.id}`, until);
  });
}

/** Ends mails that must not or need not be sent; true when it did. */
async function isPointless(services: Services, mail: MailRow): Promise<boolean> {
  const { db } = services;
  const at = services.now();
  if (mail.letter === 'M0') {
    const { minutes } = parseLetterData('M0', mail.data);
    if (addMinutes(mail.createdAt, minutes) < at) {
      const words = 'The sign-in link ran out before the mail could be sent.';
      return endMail(db, mail, { state: 'failed', words, at }, true);
    }
  }
  if (!mail.againOf && (await takesNoMail(db, mail.to))) {
    const words = 'Not sent: an earlier mail to this address came back for good, or was reported as unwanted.';
    return endMail(db, mail, { state: 'bounced', bounce: 'permanent', words, at });
  }
  const since = mail.notBefore ?? mail.createdAt;
  if (mail.tries > 0 && at.getTime() - since.getTime() > GIVE_UP_AFTER_MS) {
    const words = `Given up after three days and ${mail.tries} tries. ${mail.lastError ?? ''}`.trim();
    return endMail(db, mail, { state: 'failed', words, at });
  }
  return false;
}

async function handOver(services: Services, mail: MailRow, studio: StudioFacts): Promise<void> {
  const { db, resend, log } = services;
  const { email, subject } = await prepare(services, mail, studio);
  const keyForgotten = services.now().getTime() - mail.createdAt.getTime() > KEY_KEPT_MS;
  if (mail.tries > 1 && keyForgotten) {
    const found = await findSentMail(resend, { ...mail, subject });
    if (found) return markSent(db, mail, found, services.now());
  }
  const { data, error } = await resend.emails.send(email, {
    idempotencyKey: mail.id,
    signal: AbortSignal.timeout(ANSWER_WITHIN_MS),
  });
  if (!error) return markSent(db, mail, data.id, services.now());
  const verdict = judgeRefusal(error);
  const words = refusalInWords(error);
  log.warn({ mailId: mail.id, letter: mail.letter, tries: mail.tries, refusal: error.name, verdict }, words);
  if (verdict === 'look') return markSent(db, mail, await findSentMail(resend, { ...mail, subject }), services.now());
  if (verdict === 'give-up') {
    await endMail(db, mail, { state: 'failed', words, at: services.now() });
    return;
  }
  await markTried(db, mail.id, words);
  const next = addSeconds(services.now(), secondsToNextTry(mail.tries));
  await queueJob(db, 'send-mail', { mailId: mail.id }, `mail:${mail.id}`, next);
}

/** Writes the letter at its first try and keeps it; later tries send the same bytes. A sign-in letter is never kept. */
async function prepare(
  services: Services,
  mail: MailRow,
  studio: StudioFacts,
): Promise<{ email: CreateEmailOptions; subject: string }> {
  const data = parseLetterData(mail.letter, mail.data);
  const enclosed = await readPictures(services, picturesOf(data));
  const written =
    mail.subject && mail.html && mail.text
      ? { subject: mail.subject, html: mail.html, text: mail.text }
      : await renderLetter(
          mail.letter,
          data,
          frameFor(
            services.config,
            studio,
            enclosed.map((picture) => picture.photoId),
          ),
        );
  const { subject, html, text } = written;
  const kept = mail.letter === 'M0' ? { subject } : { subject, html, text };
  await services.db.update(mails).set(kept).where(eq(mails.id, mail.id));
  const email: CreateEmailOptions = {
    from: services.config.mailFrom,
    to: mail.to,
    replyTo: studio.replyTo,
    subject,
    html,
    text,
    tags: [
      { name: 'mail', value: mail.id },
      { name: 'letter', value: mail.letter },
    ],
    attachments: enclosed.map(({ photoId, content }) => ({
      filename: `${photoId}.jpg`,
      content: content.toString('base64'),
      contentType: 'image/jpeg',
      contentId: photoId,
    })),
  };
  return { email, subject };
}
