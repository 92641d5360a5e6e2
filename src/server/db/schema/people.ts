import {
  bigint,
  boolean,
  index,
  integer,
  jsonb,
  pgEnum,
  pgTable,
  primaryKey,
  text,
  timestamp,
  uuid,
} from 'drizzle-orm/pg-core';

/** An instant, kept in UTC and read as a `Date`. */
export const instant = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });

export const role = pgEnum('role', ['customer', 'maker', 'owner', 'bookkeeper']);

/** Everybody who can sign in. `name` is the full name; makers are shown `givenName` only. */
export const users = pgTable('users', {
  id: uuid('id').primaryKey().defaultRandom(),
  name: text('name'),
  givenName: text('given_name'),
  email: text('email').notNull().unique(),
  emailVerified: instant('email_verified'),
  image: text('image'),
  phone: text('phone'),
  role: role('role').notNull().default('customer'),
  active: boolean('active').notNull().default(true),
  createdAt: instant('created_at').notNull().defaultNow(),
});

/** Asked for by the Auth.js adapter; stays empty, since nobody signs in through another service. */
export const accounts = pgTable(
  'accounts',
  {
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    type: text('type').notNull(),
    provider: text('provider').notNull(),
    providerAccountId: text('provider_account_id').notNull(),
    refresh_token: text('refresh_token'),
    access_token: text('access_token'),
    expires_at: integer('expires_at'),
    token_type: text('token_type'),
    scope: text('scope'),
    id_token: text('id_token'),
    session_state: text('session_state'),
  },
  (t) => [primaryKey({ columns: [t.provider, t.providerAccountId] })],
);

export const sessions = pgTable(
  'sessions',
  {
    sessionToken: text('session_token').primaryKey(),
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    expires: instant('expires').notNull(),
  },
  (t) => [index('sessions_user').on(t.userId)],
);

export const verificationTokens = pgTable(
  'verification_tokens',
  { identifier: text('identifier').notNull(), token: text('token').notNull(), expires: instant('expires').notNull() },
  (t) => [primaryKey({ columns: [t.identifier, t.token] })],
);

/**
 * One asked sign-in: the 6-digit code (hashed) and the Auth.js token it stands for (sealed with the
 * server's secret), so that the code works from a device that never saw the mail.
 */
export const signInRequests = pgTable(
  'sign_in_requests',
  {
    id: uuid('id').primaryKey(),
    email: text('email').notNull(),
    codeHash: text('code_hash').notNull(),
    sealedToken: text('sealed_token').notNull(),
    next: text('next').notNull().default('/'),
    triesLeft: integer('tries_left').notNull().default(5),
    expiresAt: instant('expires_at').notNull(),
    usedAt: instant('used_at'),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [index('sign_in_requests_email').on(t.email)],
);

/** Staff asked in by the owner; the role is given when that address first signs in. */
export const invitations = pgTable('invitations', {
  email: text('email').primaryKey(),
  name: text('name').notNull(),
  role: role('role').notNull(),
  invitedBy: uuid('invited_by').references(() => users.id),
  createdAt: instant('created_at').notNull().defaultNow(),
  acceptedAt: instant('accepted_at'),
});

/** What a person had typed when a plain form was refused, given back to the same browser once. */
export const formReturns = pgTable('form_returns', {
  id: uuid('id').primaryKey(),
  browserId: text('browser_id').notNull(),
  values: jsonb('values').$type<Record<string, string | string[]>>().notNull(),
  problem: jsonb('problem').$type<{ code: string; message: string; fields?: Record<string, string> }>().notNull(),
  expiresAt: instant('expires_at').notNull(),
});

/** Table of the rate-limiter-flexible library (its column names). */
export const rateLimits = pgTable('rate_limits', {
  key: text('key').primaryKey(),
  points: integer('points').notNull().default(0),
  expire: bigint('expire', { mode: 'number' }),
});
