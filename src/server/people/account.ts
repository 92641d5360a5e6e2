import { and, count, eq, gt, sql } from 'drizzle-orm';
import { z } from 'zod';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { endSession, endSessions } from '../auth/session';
import { sessions, users } from '../db/schema/people';
import type { Services } from '../services';

const name = (what: string) =>
  z
    .string({ error: `Type ${what}.` })
    .trim()
    .max(120, { error: 'At most 120 characters fit here.' })
    .regex(/^[^\p{Cc}<>]*$/u, { error: 'Leave out line breaks and angle brackets.' });

export const accountSchema = z.object({
  name: name('your full name').min(1, { error: 'Type your full name, as it should stand on papers and parcels.' }),
  givenName: name('what we call you'),
  phone: z
    .string()
    .trim()
    .max(40, { error: 'A telephone number has at most 40 characters.' })
    .regex(/^[+\d ()./-]*$/, { error: 'Only figures, spaces, + ( ) . / and - stand in a telephone number.' })
    .optional()
    .default(''),
});

/** A person's own page. */
export interface Account {
  email: string;
  name: string | null;
  givenName: string | null;
  phone: string | null;
  /** Devices and browsers signed in now, this one included. */
  sessions: number;
}

const NOT_SIGNED_IN = refuse(
  'sign-in-needed',
  'You were not signed in when this was sent, so it was not carried out. What you typed is kept: sign in, then send it again.',
);

/** Reads the actor's own account. */
export async function readAccount({ db }: Services, actor: Actor): Promise<Outcome<Account>> {
  if (!actor) return NOT_SIGNED_IN;
  const [row] = await db
    .select({ email: users.email, name: users.name, givenName: users.givenName, phone: users.phone })
    .from(users)
    .where(eq(users.id, actor.id));
  const [open] = await db
    .select({ sessions: count() })
    .from(sessions)
    .where(and(eq(sessions.userId, actor.id), gt(sessions.expires, sql`now()`)));
  return row && open ? done({ ...row, ...open }) : NOT_SIGNED_IN;
}

/** Changes the actor's own name and telephone number. The address is what they sign in with and stays. */
export async function updateAccount(
  { db }: Services,
  actor: Actor,
  input: z.output<typeof accountSchema>,
): Promise<Outcome<{ name: string }>> {
  if (!actor) return NOT_SIGNED_IN;
  const givenName = input.givenName || input.name.split(/\s+/)[0];
  await db
    .update(users)
    .set({ name: input.name, givenName, phone: input.phone || null })
    .where(eq(users.id, actor.id));
  return done({ name: input.name });
}

/** Ends the session this browser holds. Without one there is nothing to end, and that is fine. */
export async function signOut({ db }: Services, token: string | undefined): Promise<Outcome<null>> {
  if (token) await endSession(db, token);
  return done(null);
}

/** Ends every session of the actor, on all devices. */
export async function signOutEverywhere({ db, log }: Services, actor: Actor): Promise<Outcome<null>> {
  if (!actor) return NOT_SIGNED_IN;
  await endSessions(db, actor.id);
  log.info({ userId: actor.id }, 'signed out everywhere');
  return done(null);
}
