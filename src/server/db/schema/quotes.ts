import { index, integer, jsonb, pgEnum, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import { commissions } from './commissions';
import { instant, users } from './people';

export const quoteState = pgEnum('quote_state', ['sent', 'withdrawn', 'accepted', 'lapsed']);

/** The owner's working copy of the next revision, one per commission (quoteDraftSchema). */
export const quoteDrafts = pgTable('quote_drafts', {
  commissionId: uuid('commission_id')
    .primaryKey()
    .references(() => commissions.id),
  draft: jsonb('draft').notNull(),
  /** Counts up at each save; a save names the one it read, so two windows cannot overwrite in silence. */
  version: integer('version').notNull().default(1),
  updatedAt: instant('updated_at').notNull(),
});

/** A sent quote revision: `body` is frozen (a trigger allows only `state` and its instants to change). */
export const quotes = pgTable(
  'quotes',
  {
    id: uuid('id').primaryKey(),
    commissionId: uuid('commission_id')
      .notNull()
      .references(() => commissions.id),
    revision: integer('revision').notNull(),
    state: quoteState('state').notNull(),
    /** Frozen: { draft, priced, customer, terms: {version, sha256}, studio } */
    body: jsonb('body').notNull(),
    /** SHA-256 (hex) over the canonical JSON of `body`. */
    sha256: text('sha256').notNull(),
    termsVersion: text('terms_version').notNull(),
    validUntil: instant('valid_until').notNull(),
    sentAt: instant('sent_at').notNull(),
    withdrawnAt: instant('withdrawn_at'),
    closedAt: instant('closed_at'),
    sentBy: uuid('sent_by').references(() => users.id),
  },
  (t) => [unique('quotes_revision').on(t.commissionId, t.revision)],
);

/** Evidence of an acceptance (T11): one per revision. A commission has one that stands, the one of its accepted quote. */
export const acceptances = pgTable('acceptances', {
  quoteId: uuid('quote_id')
    .primaryKey()
    .references(() => quotes.id),
  commissionId: uuid('commission_id')
    .notNull()
    .references(() => commissions.id),
  quoteSha256: text('quote_sha256').notNull(),
  termsVersion: text('terms_version').notNull(),
  termsSha256: text('terms_sha256').notNull(),
  typedName: text('typed_name').notNull(),
  acceptedBy: uuid('accepted_by')
    .notNull()
    .references(() => users.id),
  address: text('address').notNull(),
  declarations: jsonb('declarations').$type<Record<string, boolean>>().notNull(),
  acceptedAt: instant('accepted_at').notNull(),
});

export const stageTrigger = pgEnum('stage_trigger', [
  'acceptance',
  'gate-a',
  'before-dispatch',
  'after-delivery',
  'rework',
]);

/** A stage payment agreed in a quote. Paid, owed and overdue are computed from the ledger. */
export const stagePayments = pgTable(
  'stage_payments',
  {
    id: uuid('id').primaryKey(),
    commissionId: uuid('commission_id')
      .notNull()
      .references(() => commissions.id),
    quoteId: uuid('quote_id')
      .notNull()
      .references(() => quotes.id),
    position: integer('position').notNull(),
    label: text('label').notNull(),
    trigger: stageTrigger('trigger').notNull(),
    currency: text('currency').notNull(),
    netMinor: integer('net_minor').notNull(),
    taxMinor: integer('tax_minor').notNull(),
    grossMinor: integer('gross_minor').notNull(),
    /**
     * Pay-by instant, set once when the trigger happens: 7 days after acceptance and after gate A, 14 days after the
     * piece is finished. Null means later.
     */
    dueAt: instant('due_at'),
  },
  (t) => [
    unique('stage_payments_place').on(t.quoteId, t.position),
    index('stage_payments_commission').on(t.commissionId),
  ],
);

export const ledgerKind = pgEnum('ledger_kind', ['received', 'refund', 'fee', 'credit', 'written-off']);

/** Money that moved: append-only (a trigger refuses update and delete). Refunds are negative. */
export const ledgerEntries = pgTable(
  'ledger_entries',
  {
    id: uuid('id').primaryKey(),
    commissionId: uuid('commission_id')
      .notNull()
      .references(() => commissions.id),
    stagePaymentId: uuid('stage_payment_id').references(() => stagePayments.id),
    kind: ledgerKind('kind').notNull(),
    amountMinor: integer('amount_minor').notNull(),
    currency: text('currency').notNull(),
    /** The provider's own id (payment intent, refund) or the owner's reference; one entry for each. */
    providerId: text('provider_id').notNull().unique(),
    /** Gapless within received entries: the receipt's number. */
    receiptNo: integer('receipt_no').unique(),
    cause: jsonb('cause').notNull(),
    at: instant('at').notNull(),
  },
  (t) => [index('ledger_commission').on(t.commissionId)],
);

/** A Checkout session made at a click. Never mailed. */
export const checkoutSessions = pgTable(
  'checkout_sessions',
  {
    id: text('id').primaryKey(),
    commissionId: uuid('commission_id')
      .notNull()
      .references(() => commissions.id),
    stagePaymentId: uuid('stage_payment_id')
      .notNull()
      .references(() => stagePayments.id),
    quoteId: uuid('quote_id')
      .notNull()
      .references(() => quotes.id),
    amountMinor: integer('amount_minor').notNull(),
    currency: text('currency').notNull(),
    /** open, paid, pending (a delayed method is on its way), failed, expired */
    state: text('state').notNull().default('open'),
    url: text('url').notNull(),
    createdAt: instant('created_at').notNull(),
    expiresAt: instant('expires_at').notNull(),
  },
  (t) => [index('checkout_stage').on(t.stagePaymentId)],
);

/** Every webhook event seen, by the provider's id; a second delivery finds its row. */
export const stripeEvents = pgTable('stripe_events', {
  id: text('id').primaryKey(),
  type: text('type').notNull(),
  objectId: text('object_id').notNull(),
  outcome: text('outcome').notNull(),
  receivedAt: instant('received_at').notNull(),
});

/** Rows of one per series, locked while a number is taken, so that no number is skipped. */
export const numberSeries = pgTable('number_series', {
  series: text('series').primaryKey(),
  last: integer('last').notNull().default(0),
});
