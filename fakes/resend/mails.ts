import { randomUUID } from 'node:crypto';
import type { GetEmailResponseSuccess, ListEmail } from 'resend';
import { without } from '../state/rows';
import { MailRefusal } from './errors';
import { readMail, type MailInput } from './mail-params';
import { recordEvent } from './outcomes';
import type { Mail, World } from './world';

/** Takes one mail on and says that it is on its way. Call inside a write. */
export function sendMail(world: World, input: MailInput): { id: string } {
  const id = randomUUID();
  const at = world.now();
  const domain = /@([^>\s]+)/.exec(input.from)?.[1] ?? 'example.org';
  const mail: Mail = {
    id,
    object: 'email',
    from: input.from,
    to: input.to,
    cc: input.cc ?? null,
    bcc: input.bcc ?? null,
    reply_to: input.reply_to ?? null,
    subject: input.subject,
    html: input.html ?? null,
    text: input.text ?? null,
    tags: input.tags,
    created_at: at.toISOString(),
    scheduled_at: null,
    message_id: `<${id}@${domain}>`,
    last_event: 'queued',
    headers: input.headers ?? {},
    attachments: (input.attachments ?? []).map(keptAttachment),
    history: [],
    outcomeAt: at.getTime() + world.outcomeAfterMs,
  };
  world.tables.mails.put(id, mail);
  recordEvent(world, id, 'email.sent');
  return { id };
}

function keptAttachment(file: NonNullable<MailInput['attachments']>[number]): Mail['attachments'][number] {
  const content = file.content ?? '';
  const kept = { filename: file.filename ?? 'without a name', bytes: Buffer.byteLength(content, 'base64') };
  const picture = /^image\/(jpeg|png|gif|webp)$/.test(file.content_type ?? '');
  if (!file.content_id || !picture) return kept;
  return { ...kept, inline: { contentId: file.content_id, dataUri: `data:${file.content_type};base64,${content}` } };
}

const LARGEST_BATCH = 100;

type BatchAnswer = { data: { id: string }[]; errors?: { index: number; message: string }[] };

/** Takes up to 100 mails on; when strict, all or none. Call inside a write. */
export function sendBatch(world: World, input: unknown, strict: boolean): BatchAnswer {
  if (!Array.isArray(input) || input.length === 0 || input.length > LARGEST_BATCH) {
    throw new MailRefusal(422, 'validation_error', `A batch holds 1 to ${LARGEST_BATCH} emails.`);
  }
  const read = input.map((one: unknown, index) => readInBatch(one, index, strict));
  const mails = read.filter((one): one is MailInput => !(one instanceof MailRefusal));
  const data = mails.map((mail) => sendMail(world, mail));
  if (strict) return { data };
  const errors = read.flatMap((one, index) => (one instanceof MailRefusal ? [{ index, message: one.message }] : []));
  return { data, errors };
}

function readInBatch(input: unknown, index: number, strict: boolean): MailInput | MailRefusal {
  try {
    const mail = readMail(input);
    if (mail.attachments?.length)
      throw new MailRefusal(422, 'validation_error', 'Attachments cannot be sent in a batch.');
    return mail;
  } catch (error) {
    if (!(error instanceof MailRefusal)) throw error;
    if (strict) throw new MailRefusal(error.status, error.problem, `emails[${index}]: ${error.message}`);
    return error;
  }
}

/** The mail with this id as the API shows it. @throws MailRefusal (404) when there is none. */
export function showMail(world: World, id: string): GetEmailResponseSuccess {
  const mail = world.tables.mails.get(id);
  if (!mail) throw new MailRefusal(404, 'not_found', 'Email not found');
  return without(mail, 'headers', 'attachments', 'history', 'outcomeAt');
}

/** One page of all mails, newest first. @throws MailRefusal for a wrong limit or an unknown id. */
export function listMails(
  world: World,
  query: URLSearchParams,
): { object: 'list'; has_more: boolean; data: ListEmail[] } {
  const { rows, more } = cut(world.tables.mails.newest(), query);
  const data = rows.map((mail) => without(showMail(world, mail.id), 'html', 'text', 'tags', 'object'));
  return { object: 'list', has_more: more, data };
}

const USUAL_LIMIT = 20;

/** Cuts a list as Resend does: `limit` 1 to 100, `after` or `before` an id. */
export function cut<Row extends { id: string }>(rows: Row[], query: URLSearchParams): { rows: Row[]; more: boolean } {
  const limit = Number(query.get('limit') ?? USUAL_LIMIT);
  if (!Number.isInteger(limit) || limit < 1 || limit > 100) {
    throw new MailRefusal(422, 'validation_error', 'The `limit` must be a number from 1 to 100.');
  }
  const [after, before] = [query.get('after'), query.get('before')];
  if (after && before) throw new MailRefusal(422, 'validation_error', 'Use `after` or `before`, not both.');
  const place = after || before ? rows.findIndex((row) => row.id === (after ?? before)) : -1;
  if ((after || before) && place < 0)
    throw new MailRefusal(422, 'invalid_parameter', 'The id to continue from is unknown.');
  if (before) {
    const start = Math.max(0, place - limit);
    return { rows: rows.slice(start, place), more: start > 0 };
  }
  return { rows: rows.slice(place + 1, place + 1 + limit), more: rows.length > place + 1 + limit };
}
