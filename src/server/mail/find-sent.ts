import type { Resend } from 'resend';
import type { MailRow } from './claim';

const PAGE = 100;
/** Pages looked through at most; a studio sends far fewer mails in three days. */
const MOST_PAGES = 40;
const CLOCK_SLACK_MS = 5 * 60_000;

/**
 * Looks at the mail service for a mail of ours that an earlier try may have handed over, by the tag that
 * carries its row's id. Needed once the service has forgotten idempotency keys.
 *
 * @returns the service's id of the mail, or null when it has none
 * @throws when the service cannot be asked; the mail must not be sent then
 */
export async function findSentMail(
  resend: Resend,
  mail: Pick<MailRow, 'id' | 'to' | 'subject' | 'createdAt'>,
): Promise<string | null> {
  const oldest = mail.createdAt.getTime() - CLOCK_SLACK_MS;
  let after: string | undefined;
  for (let page = 0; page < MOST_PAGES; page += 1) {
    const { data, error } = await resend.emails.list({ limit: PAGE, ...(after ? { after } : {}) });
    if (error) throw new Error(`the mail service could not be asked for sent mails: ${error.message}`);
    for (const sent of data.data) {
      if (new Date(sent.created_at).getTime() < oldest) return null;
      const alike = sent.subject === mail.subject && sent.to.some((to) => to.toLowerCase() === mail.to.toLowerCase());
      if (alike && (await carriesTag(resend, sent.id, mail.id))) return sent.id;
    }
    after = data.data.at(-1)?.id;
    if (!data.has_more || !after) return null;
  }
  return null;
}

async function carriesTag(resend: Resend, sentId: string, mailId: string): Promise<boolean> {
  const { data, error } = await resend.emails.get(sentId);
  if (error) throw new Error(`the mail service could not be asked for mail ${sentId}: ${error.message}`);
  return data.tags?.some((tag) => tag.name === 'mail' && tag.value === mailId) ?? false;
}
