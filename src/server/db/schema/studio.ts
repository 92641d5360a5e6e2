import { index, integer, jsonb, pgEnum, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import type { StudioRates } from '../../../commission/rates';
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
    }>()
    .notNull(),
});

export const mailState = pgEnum('mail_state', ['queued', 'sent', 'delivered', 'bounced', 'failed']);

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
    lastError: text('last_error'),
    notBefore: instant('not_before'),
    createdAt: instant('created_at').notNull(),
    sentAt: instant('sent_at'),
    settledAt: instant('settled_at'),
  },
  (t) => [index('mails_commission').on(t.commissionId), index('mails_state').on(t.state)],
);
