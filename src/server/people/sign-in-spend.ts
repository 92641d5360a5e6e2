import { Auth, raw } from '@auth/core';
import { AuthError } from '@auth/core/errors';
import { and, desc, eq, gt, inArray, isNull, sql } from 'drizzle-orm';
import { timingSafeEqual } from 'node:crypto';
import { z } from 'zod';
import type { Role } from '../../commission/permissions';
import { done, refuse, type Outcome, type Problem } from '../../commission/problem';
import { afterSignIn } from './after-sign-in';
import { addressSchema } from '../auth/address';
import { authConfig, authRequest } from '../auth/auth-config';
import { limit } from '../auth/limit';
import { HOME } from '../auth/next-path';
import { hashMailedToken, unseal } from '../auth/secrets';
import { endSession, sessionCookies, sessionCookieName, type NewCookie } from '../auth/session';
import type { Visitor } from '../auth/visitor';
import type { Transaction } from '../db/client';
import { signInRequests, users, verificationTokens } from '../db/schema/people';
import type { Services } from '../services';
import { hashCode } from './sign-in';

export const spendSchema = z.object({
  request: z.uuid({ error: 'This link is not whole. Open it from the mail again, or type the code instead.' }),
  token: z.string().regex(/^[\w-]{43}$/, {
    error: 'This link is not whole. Open it from the mail again, or type the code instead.',
  }),
});

export const codeSchema = z.object({
  email: addressSchema,
  code: z
    .string({ error: 'Type the six digits from the mail.' })
    .transform((typed) => typed.normalize('NFKC').replace(/[\s-]/g, ''))
    .pipe(z.string().regex(/^\d{6}$/, { error: 'The code has six digits; it stands in the mail, above the link.' })),
});

/** The enquiry whose page the code was typed on, if any: a refusal leads back there. */
export const codeFromSchema = z.object({
  enquiry: z
    .string()
    .regex(/^[A-Z]{1,4}-\d{3,6}$/)
    .optional()
    .catch(undefined),
});

/** Somebody signed in: where they go, and the cookie that says so. Never answer with the cookies in a body. */
export interface SignedIn {
  next: string;
  email: string;
  cookies: NewCookie[];
}

type SignInRequest = typeof signInRequests.$inferSelect;
const isLive = and(isNull(signInRequests.usedAt), gt(signInRequests.expiresAt, sql`now()`));

const SPENT = refuse(
  'stale',
  'This link was used already, or is older than ten minutes. Each works once. Ask for a new one below.',
);
const WRONG_CODE = refuse(
  'invalid',
  'This code does not fit this address, or is no longer good. A code works for ten minutes, once, and allows five tries. Use the link in the mail instead, or ask for a new mail.',
  { code: 'Check the six digits in the newest mail.' },
);

/** What the confirm page says before the button is pressed; looks, and changes nothing. */
export async function readSignInLink(
  { db, config }: Services,
  link: { request: string | null; token: string | null },
): Promise<{ email: string } | null> {
  const given = spendSchema.safeParse(link);
  if (!given.success) return null;
  const [row] = await db
    .select({ email: signInRequests.email })
    .from(signInRequests)
    .innerJoin(verificationTokens, eq(verificationTokens.identifier, signInRequests.email))
    .where(
      and(
        eq(signInRequests.id, given.data.request),
        isLive,
        eq(verificationTokens.token, hashMailedToken(config.authSecret, given.data.token)),
      ),
    );
  return row ?? null;
}

/** Spends a mailed link: once, within ten minutes by the database's clock. */
export async function spendLink(
  services: Services,
  input: z.output<typeof spendSchema>,
  oldSession?: string,
): Promise<Outcome<SignedIn>> {
  return orRefusal(() =>
    services.db.transaction(async (tx) => {
      const [row] = await tx
        .select()
        .from(signInRequests)
        .where(and(eq(signInRequests.id, input.request), isLive))
        .for('update');
      return row ? signIn(tx, services, row, input.token, oldSession) : SPENT;
    }),
  );
}

/**
 * Spends a link by its code, on any device. A wrong code costs a try of each request open for that address; with
 * none left the code is dead, while the link in the mail goes on working.
 */
export async function spendCode(
  services: Services,
  visitor: Visitor,
  input: z.output<typeof codeSchema>,
  oldSession?: string,
): Promise<Outcome<SignedIn>> {
  const fromClient = await limit(services, 'code-client', visitor.client);
  if (!fromClient.ok) return fromClient;
  const forAddress = await limit(services, 'code-address', input.email);
  if (!forAddress.ok) return forAddress;
  const { authSecret } = services.config;
  return orRefusal(() =>
    services.db.transaction(async (tx) => {
      const open = await openRequests(tx, input.email);
      const row = open.find(({ id, codeHash }) => isSame(codeHash, hashCode(authSecret, id, input.code)));
      if (row) return signIn(tx, services, row, unseal(authSecret, row.sealedToken, row.id), oldSession);
      await costATry(tx, open);
      return WRONG_CODE;
    }),
  );
}

function openRequests(tx: Transaction, email: string): Promise<SignInRequest[]> {
  return tx
    .select()
    .from(signInRequests)
    .where(and(eq(signInRequests.email, email), isLive, gt(signInRequests.triesLeft, 0)))
    .orderBy(desc(signInRequests.id))
    .for('update');
}

async function costATry(tx: Transaction, open: SignInRequest[]): Promise<void> {
  if (open.length === 0) return;
  const ids = open.map(({ id }) => id);
  await tx
    .update(signInRequests)
    .set({ triesLeft: sql`${signInRequests.triesLeft} - 1` })
    .where(inArray(signInRequests.id, ids));
}

function isSame(kept: string, tried: string): boolean {
  return kept.length === tried.length && timingSafeEqual(Buffer.from(kept), Buffer.from(tried));
}

/** Hands the token to Auth.js within the transaction: token spent, person, session and what follows, or nothing. */
async function signIn(
  tx: Transaction,
  services: Services,
  request: SignInRequest,
  token: string,
  oldSession: string | undefined,
): Promise<Outcome<SignedIn>> {
  const { config, log } = services;
  // Two links of an address that is new may be pressed at once: one of them makes the person, the other waits.
  await tx.execute(sql`select pg_advisory_xact_lock(hashtext(${request.email}))`);
  const [person] = await tx.select().from(users).where(eq(users.email, request.email));
  if (person && !person.active) {
    return refuse('not-allowed', 'This address was taken off the list of people who sign in. Write to the studio.');
  }
  const query = new URLSearchParams({ token, email: request.email });
  const errors: Error[] = [];
  const answer = await Auth(authRequest(config.publicUrl, `/callback/mail?${query}`, null), {
    ...authConfig(config, tx, { onError: (error) => errors.push(error) }),
    raw,
  });
  const cookies = sessionCookies(config, answer.cookies ?? []);
  const session = cookies.find(({ name, value }) => name === sessionCookieName(config) && value);
  if (!session) throw errors[0] ?? new Error('Auth.js opened no session');
  if (oldSession) await endSession(tx, oldSession);
  await tx
    .update(signInRequests)
    .set({ usedAt: sql`now()` })
    .where(eq(signInRequests.id, request.id));
  const user = await afterSignIn(tx, services, { email: request.email, session: session.value });
  log.info({ userId: user.id, role: user.role }, 'signed in');
  return done({ next: request.next || HOME[user.role satisfies Role], email: request.email, cookies });
}

/** A token that Auth.js does not take undoes the transaction and is told like a spent link. */
async function orRefusal<T>(work: () => Promise<Outcome<T>>): Promise<Outcome<T> | { ok: false; problem: Problem }> {
  try {
    return await work();
  } catch (error) {
    if (error instanceof AuthError && error.type === 'Verification') return SPENT;
    throw error;
  }
}
