import { DrizzleAdapter } from '@auth/drizzle-adapter';
import type { Adapter, AdapterSession, AdapterUser } from '@auth/core/adapters';
import { and, eq, gt, sql } from 'drizzle-orm';
import type { Db } from '../db/client';
import { accounts, sessions, users, verificationTokens } from '../db/schema/people';
import { hashSessionToken } from './secrets';

/**
 * Auth.js's adapter over our tables, with three rules of our own: session tokens are kept hashed, a person who was
 * taken off the list has no session, and the database's clock, not this machine's, says whether a mailed token is
 * still good.
 */
export function createAdapter(db: Db): Adapter {
  const stock = DrizzleAdapter(db, {
    usersTable: users,
    accountsTable: accounts,
    sessionsTable: sessions,
    verificationTokensTable: verificationTokens,
  });
  return {
    ...stock,
    createSession: async (session) => {
      const row = { ...session, sessionToken: hashSessionToken(session.sessionToken) };
      await db.insert(sessions).values(row);
      return session;
    },
    getSessionAndUser: (token) => findSession(db, token),
    updateSession: async ({ sessionToken, expires }) => {
      const row = eq(sessions.sessionToken, hashSessionToken(sessionToken));
      if (expires) await db.update(sessions).set({ expires }).where(row);
      return null;
    },
    deleteSession: async (token) => {
      await db.delete(sessions).where(eq(sessions.sessionToken, hashSessionToken(token)));
    },
    useVerificationToken: ({ identifier, token }) => spendToken(db, identifier, token),
  };
}

async function findSession(db: Db, token: string): Promise<{ session: AdapterSession; user: AdapterUser } | null> {
  const [row] = await db
    .select({ session: sessions, user: users })
    .from(sessions)
    .innerJoin(users, eq(users.id, sessions.userId))
    .where(and(eq(sessions.sessionToken, hashSessionToken(token)), eq(users.active, true)));
  return row ? { session: { ...row.session, sessionToken: token }, user: row.user } : null;
}

async function spendToken(db: Db, identifier: string, token: string) {
  const [row] = await db
    .delete(verificationTokens)
    .where(
      and(
        eq(verificationTokens.identifier, identifier),
        eq(verificationTokens.token, token),
        gt(verificationTokens.expires, sql`now()`),
      ),
    )
    .returning();
  // Auth.js compares `expires` with this machine's clock; the database has already judged.
  return row ? { ...row, expires: new Date(Date.now() + 60_000) } : null;
}
