import { boolean, index, integer, jsonb, pgEnum, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import { PIECE_STAGES } from '../../../commission/making/making';
import { commissions } from './commissions';
import { instant, users } from './people';

export const pieceStage = pgEnum('piece_stage', PIECE_STAGES);
export const attemptResult = pgEnum('attempt_result', ['sound', 'scrapped', 'second']);

/** One wanted casting of a commission. `route` is the stages it goes through, in order. */
export const pieces = pgTable(
  'pieces',
  {
    id: uuid('id').primaryKey(),
    commissionId: uuid('commission_id')
      .notNull()
      .references(() => commissions.id),
    number: integer('number').notNull(),
    route: pieceStage('route').array().notNull(),
    /** Last stage done; `waiting` before the pattern is ready. */
    stage: pieceStage('stage').notNull().default('waiting'),
    targetMassG: integer('target_mass_g'),
    toleranceG: integer('tolerance_g'),
    measured: jsonb('measured').$type<{ massG?: number; balanceMm?: number; edge?: string; note?: string }>(),
    updatedAt: instant('updated_at').notNull(),
  },
  (t) => [unique('pieces_number').on(t.commissionId, t.number)],
);

/** One mould poured once. `result` stays null until it is broken out. */
export const attempts = pgTable(
  'attempts',
  {
    id: uuid('id').primaryKey(),
    commissionId: uuid('commission_id')
      .notNull()
      .references(() => commissions.id),
    pieceId: uuid('piece_id').references(() => pieces.id),
    number: integer('number').notNull(),
    family: text('family').notNull(),
    mouldNo: text('mould_no'),
    heatNo: text('heat_no'),
    pouredMassG: integer('poured_mass_g'),
    castMassG: integer('cast_mass_g'),
    result: attemptResult('result'),
    /** Defect name when scrapped, e.g. misrun, cold shut (commission/defects). */
    cause: text('cause'),
    causeNote: text('cause_note'),
    /** Stage at which the fault came to light. */
    foundAt: text('found_at'),
    mouldAt: instant('mould_at').notNull(),
    pouredAt: instant('poured_at'),
    closedAt: instant('closed_at'),
    by: uuid('by').references(() => users.id),
  },
  (t) => [unique('attempts_number').on(t.commissionId, t.number), index('attempts_family').on(t.family, t.result)],
);

/** Look-and-approve gates. Approval binds to the hash of the photo set shown. */
export const gates = pgTable(
  'gates',
  {
    id: uuid('id').primaryKey(),
    commissionId: uuid('commission_id')
      .notNull()
      .references(() => commissions.id),
    gate: text('gate').notNull(),
    round: integer('round').notNull().default(1),
    /** open, approved, changes */
    state: text('state').notNull().default('open'),
    photoSetSha256: text('photo_set_sha256').notNull(),
    photoIds: uuid('photo_ids').array().notNull(),
    note: text('note'),
    openedAt: instant('opened_at').notNull(),
    decidedAt: instant('decided_at'),
    decidedBy: uuid('decided_by').references(() => users.id),
  },
  (t) => [unique('gates_round').on(t.commissionId, t.gate, t.round)],
);

export const minutesLog = pgTable(
  'minutes_log',
  {
    id: uuid('id').primaryKey(),
    clientId: text('client_id').notNull().unique(),
    commissionId: uuid('commission_id')
      .notNull()
      .references(() => commissions.id),
    pieceId: uuid('piece_id').references(() => pieces.id),
    operation: text('operation').notNull(),
    minutes: integer('minutes').notNull(),
    by: uuid('by')
      .notNull()
      .references(() => users.id),
    at: instant('at').notNull(),
  },
  (t) => [index('minutes_commission').on(t.commissionId)],
);

/** A running timer, one per maker and commission at most. */
export const timers = pgTable(
  'timers',
  {
    id: uuid('id').primaryKey(),
    commissionId: uuid('commission_id')
      .notNull()
      .references(() => commissions.id),
    by: uuid('by')
      .notNull()
      .references(() => users.id),
    operation: text('operation').notNull(),
    startedAt: instant('started_at').notNull(),
  },
  (t) => [unique('timers_one').on(t.commissionId, t.by)],
);

/** A photo of the work. Files lie under the data folder by key, re-encoded, without metadata. */
export const photos = pgTable(
  'photos',
  {
    id: uuid('id').primaryKey(),
    clientId: text('client_id').notNull().unique(),
    commissionId: uuid('commission_id')
      .notNull()
      .references(() => commissions.id),
    pieceId: uuid('piece_id').references(() => pieces.id),
    attemptId: uuid('attempt_id').references(() => attempts.id),
    stage: text('stage').notNull(),
    caption: text('caption').notNull(),
    alt: text('alt').notNull().default(''),
    sha256: text('sha256').notNull(),
    /** Keys by size: { large, medium, thumb } with their pixel sizes. */
    files: jsonb('files')
      .$type<Record<'large' | 'medium' | 'thumb', { key: string; width: number; height: number }>>()
      .notNull(),
    /** Shown on the customer's page. */
    shared: boolean('shared').notNull().default(true),
    takenAt: instant('taken_at').notNull(),
    by: uuid('by').references(() => users.id),
    createdAt: instant('created_at').notNull(),
  },
  (t) => [index('photos_commission').on(t.commissionId, t.takenAt)],
);
