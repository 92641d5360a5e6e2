import { type AnyPgColumn, index, integer, jsonb, pgEnum, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import type { StudioRates } from '../../../commission/pricing/rates';
import { commissions } from './commissions';
import { instant, users } from './people';

/** Every version of the studio's rates; the newest is in force. Quotes name the version they used. */
export const rateVersions = pgTable('rate_versions', {
  id: uuid('id').primaryKey(),
  rates: jsonb('rates').$type<StudioRates>().notNull(),
  setBy: uuid('set_by').references(() => users.id),
  createdAt: instant('created_at').notNull(),
});

/** Studio facts on papers and pages: name, place, mark, time zone, reply address. One row, id 'studio'. */
export const studioSettings = pgTable('studio_settings', {
  id: text('id').primaryKey().default('studio'),
  settings: jsonb('settings')
    .$type<{
      name: string;
      place: string;
      refPrefix: string;
      timeZone: string;
      replyTo: string;
      mark: string;
      vatNumber?: string;
      /** Local times "HH:MM" between which no mail leaves but receipts and sign-in; null sends at any hour. */
      quietHours: { from: string; to: string } | null;
      /** Progress mails of one commission leave at least this many days apart; null sends each stage's own at once. */
      progressEveryDays: number | null;
    }>()
    .notNull(),
});

/** `merged`: a progress mail whose news a later one told, where the studio limits how often they leave. */
export const mailState = pgEnum('mail_state', [
  'queued',
  'sent',
  'delivered',
  'bounced',
  'complained',
  'failed',
  'merged',
]);

/** The outbox. A row is written in the transaction of the change that causes it. */
export const mails = pgTable(
  'mails',
  {
    id: uuid('id').primaryKey(),
    /** M0 … M45 of the mail catalogue. */
    letter: text('letter').notNull(),
    to: text('to').notNull(),
    commissionId: uuid('commission_id').references(() => commissions.id),
    /** Ids and plain values the letter needs; never a secret except M0's, wiped when sent. */
    data: jsonb('data').$type<Record<string, unknown>>().notNull(),
    /** One mail for each cause: e.g. "M12:<ledger entry id>". */
    cause: text('cause').notNull().unique(),
    state: mailState('state').notNull().default('queued'),
    subject: text('subject'),
    html: text('html'),
    text: text('text'),
    providerId: text('provider_id').unique(),
    tries: integer('tries').notNull().default(0),
    /** In words, for the owner: why the last try failed, or what the other mail server said. */
    lastError: text('last_error'),
    /** Of a bounce: 'permanent' (the address takes no mail from us any more) or 'transient'. */
    bounce: text('bounce').$type<'permanent' | 'transient'>(),
    /** The mail this one repeats, when the owner pressed "Send again". */
    againOf: uuid('again_of').references((): AnyPgColumn => mails.id),
    notBefore: instant('not_before'),
    createdAt: instant('created_at').notNull(),
    sentAt: instant('sent_at'),
    settledAt: instant('settled_at'),
  },
  (t) => [index('mails_commission').on(t.commissionId), index('mails_state').on(t.state), index('mails_to').on(t.to)],
);
