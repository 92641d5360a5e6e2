import {
  bigserial,
  boolean,
  date,
  index,
  integer,
  jsonb,
  pgEnum,
  pgTable,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { DEAL_STATES } from '../../../commission/deal';
import type { Problem } from '../../../commission/problem';
import type { Measure } from '../../../casting/measure';
import { instant, role, users } from './people';

export const dealState = pgEnum('deal_state', DEAL_STATES);

/** One commission: the deal. Pieces, money and history hang on it in tables of their own. */
export const commissions = pgTable(
  'commissions',
  {
    id: uuid('id').primaryKey(),
    /** Shown number, e.g. MF-0181, from the sequence `commission_ref`. */
    ref: text('ref').notNull().unique(),
    deal: dealState('deal').notNull().default('enquiry'),
    /** State to return to from `held`, `issue` or `rework`. */
    dealBefore: dealState('deal_before'),
    customerId: uuid('customer_id').references(() => users.id),
    /** Address an unconfirmed enquiry waits for; `confirmedAt` null means it does not count yet. */
    email: text('email').notNull(),
    customerName: text('customer_name').notNull(),
    phone: text('phone'),
    confirmedAt: instant('confirmed_at'),
    browserId: text('browser_id'),
    /** Sent by the browser with the enquiry, so that a second press makes no second enquiry. */
    clientId: text('client_id').unique(),
    title: text('title').notNull(),
    formSlug: text('form_slug'),
    alloy: text('alloy').notNull(),
    family: text('family').notNull(),
    pieces: integer('pieces').notNull(),
    bladed: boolean('bladed').notNull().default(false),
    /** The enquiry as sent (enquirySchema) and the estimate's own inputs (estimateRequestSchema). */
    enquiry: jsonb('enquiry').notNull(),
    estimateRequest: jsonb('estimate_request').notNull(),
    /** Estimate as shown to the customer when they asked, with model and rates version. */
    estimate: jsonb('estimate').notNull(),
    /** The range the owner sent (T6), if any: { lowMinor, highMinor, assumptions, dateRange, sentAt }. */
    ownerEstimate: jsonb('owner_estimate'),
    currency: text('currency').notNull().default('GBP'),
    destination: text('destination').notNull(),
    neededBy: date('needed_by'),
    /** Promise: the range from the accepted quote as dates; moved only by an event. */
    leavesFrom: date('leaves_from'),
    leavesTo: date('leaves_to'),
    heldUntil: date('held_until'),
    declineReason: text('decline_reason'),
    buyer: jsonb('buyer').$type<{ kind: 'consumer' | 'institution'; poNumber?: string; netDays?: number }>(),
    shipping: jsonb('shipping').$type<{ lines: string[]; country: string; phone?: string }>(),
    /** `parcel` is what it looks like from outside, `duties` what may be asked at the border. */
    dispatch: jsonb('dispatch').$type<{
      carrier: string;
      tracking: string;
      sentAt: string;
      adultSignature: boolean;
      parcel?: string;
      duties?: string;
    }>(),
    createdAt: instant('created_at').notNull(),
    updatedAt: instant('updated_at').notNull(),
  },
  (t) => [index('commissions_customer').on(t.customerId), index('commissions_deal').on(t.deal)],
);

/** History: append-only (a trigger refuses update and delete). `code` is T1 … T52 or a plain verb. */
export const events = pgTable(
  'events',
  {
    id: bigserial('id', { mode: 'number' }).primaryKey(),
    commissionId: uuid('commission_id')
      .notNull()
      .references(() => commissions.id),
    at: instant('at').notNull(),
    code: text('code').notNull(),
    actorId: uuid('actor_id').references(() => users.id),
    actorRole: text('actor_role').notNull(),
    from: text('from_state'),
    to: text('to_state'),
    /** One plain sentence for history lists; never money or surnames when `makerMaySee`. */
    sentence: text('sentence').notNull(),
    /** Shown to the customer on their page. */
    public: boolean('public').notNull().default(false),
    data: jsonb('data').notNull().default({}),
  },
  (t) => [index('events_commission').on(t.commissionId, t.id)],
);

export const questions = pgTable(
  'questions',
  {
    id: uuid('id').primaryKey(),
    commissionId: uuid('commission_id')
      .notNull()
      .references(() => commissions.id),
    round: integer('round').notNull(),
    position: integer('position').notNull(),
    text: text('text').notNull(),
    why: text('why').notNull(),
    required: boolean('required').notNull().default(true),
    answer: text('answer'),
    answeredAt: instant('answered_at'),
    askedAt: instant('asked_at').notNull(),
  },
  (t) => [unique('questions_place').on(t.commissionId, t.round, t.position)],
);

/** Messages between customer and studio. */
export const messages = pgTable(
  'messages',
  {
    id: uuid('id').primaryKey(),
    commissionId: uuid('commission_id')
      .notNull()
      .references(() => commissions.id),
    clientId: text('client_id').notNull().unique(),
    authorId: uuid('author_id').references(() => users.id),
    authorRole: role('author_role').notNull(),
    body: text('body').notNull(),
    at: instant('at').notNull(),
  },
  (t) => [index('messages_commission').on(t.commissionId, t.at)],
);

export const uploadKind = pgEnum('upload_kind', ['picture', 'document', 'mesh', 'step']);

/** A file sent by a customer or guest. The bytes lie under the data folder by `storageKey`. */
export const uploads = pgTable(
  'uploads',
  {
    id: uuid('id').primaryKey(),
    clientId: text('client_id').notNull(),
    browserId: text('browser_id').notNull(),
    ownerId: uuid('owner_id').references(() => users.id),
    commissionId: uuid('commission_id').references(() => commissions.id),
    kind: uploadKind('kind').notNull(),
    /** Name as given, for display only. */
    displayName: text('display_name').notNull(),
    mime: text('mime').notNull(),
    bytes: integer('bytes').notNull(),
    sha256: text('sha256').notNull(),
    storageKey: text('storage_key').notNull(),
    thumbKey: text('thumb_key'),
    measure: jsonb('measure').$type<Measure>(),
    createdAt: instant('created_at').notNull(),
  },
  (t) => [unique('uploads_client').on(t.browserId, t.clientId), index('uploads_commission').on(t.commissionId)],
);

/** Things that did not fit and wait for the owner: what happened and what to do, nothing guessed. */
export const tray = pgTable('tray', {
  id: uuid('id').primaryKey(),
  commissionId: uuid('commission_id').references(() => commissions.id),
  problem: jsonb('problem').$type<Problem>().notNull(),
  data: jsonb('data').notNull(),
  createdAt: instant('created_at').notNull(),
  settledAt: instant('settled_at'),
  settledBy: uuid('settled_by').references(() => users.id),
});
