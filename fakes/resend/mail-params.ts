import { z } from 'zod';
import { MailRefusal } from './errors';

const FORMAT = 'The email address needs to follow the `email@example.com` or `Name <email@example.com>` format.';

/** The bare address in `Name <a@b.c>` or `a@b.c`; null when there is none. */
export function bareAddress(text: string): string | null {
  const inBrackets = /^[^<>]*<([^<>]+)>$/.exec(text.trim());
  const address = (inBrackets?.[1] ?? text).trim();
  return /^[^\s@<>,;]+@[^\s@<>,;]+\.[^\s@<>,;]+$/.test(address) ? address : null;
}

const address = z.string().refine((text) => bareAddress(text) !== null, FORMAT);
const addresses = z
  .union([address.transform((one) => [one]), z.array(address).max(50, 'There can be 50 addresses at most.')], FORMAT)
  .optional();

const tagText = z
  .string()
  .max(256)
  .regex(/^[A-Za-z0-9_-]+$/, 'Tags should only contain ASCII letters, numbers, underscores, or dashes.');

const attachment = z.looseObject({
  filename: z.string().optional(),
  content: z.string().optional(),
  content_type: z.string().optional(),
  content_id: z.string().optional(),
});

const mailSchema = z.looseObject({
  from: address,
  to: z.union([address.transform((one) => [one]), z.array(address).min(1).max(50)], FORMAT),
  cc: addresses,
  bcc: addresses,
  reply_to: addresses,
  subject: z.string(),
  html: z.string().optional(),
  text: z.string().optional(),
  headers: z.record(z.string(), z.string()).optional(),
  tags: z.array(z.object({ name: tagText, value: tagText })).optional(),
  attachments: z.array(attachment).optional(),
  scheduled_at: z.undefined('This stand-in does not schedule mails: leave scheduled_at out.').optional(),
  template: z.undefined('This stand-in has no templates: send html or text.').optional(),
});

export type MailInput = z.output<typeof mailSchema>;

/**
 * Reads one mail.
 * @throws MailRefusal (422) naming the field that is missing or wrong.
 */
export function readMail(input: unknown): MailInput {
  const given = (input ?? {}) as Record<string, unknown>;
  for (const field of ['from', 'to', 'subject']) {
    if (given[field] === undefined || given[field] === '') {
      throw new MailRefusal(422, 'missing_required_field', `Missing \`${field}\` field.`);
    }
  }
  if (given['html'] === undefined && given['text'] === undefined && given['template'] === undefined) {
    throw new MailRefusal(422, 'missing_required_field', 'Missing `html` or `text` field.');
  }
  const parsed = mailSchema.safeParse(input);
  if (parsed.success) return parsed.data;
  const issue = parsed.error.issues[0];
  throw new MailRefusal(
    422,
    'validation_error',
    `Invalid \`${String(issue?.path[0] ?? 'body')}\` field. ${issue?.message ?? ''}`,
  );
}
