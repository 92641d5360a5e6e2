import { lt, sql } from 'drizzle-orm';
import { formReturns, rateLimits, sessions, signInRequests, verificationTokens } from '../db/schema/people';
import type { Services } from '../services';

/**
 * Deletes what has run out and is of no more use: sessions, mailed tokens, refused forms, used-up allowances, and
 * sign-in requests a day after their end. Returns how many rows went.
 */
export async function sweepSignIns({ db }: Pick<Services, 'db'>): Promise<number> {
  const gone = [
    await db.delete(sessions).where(lt(sessions.expires, sql`now()`)),
    await db.delete(verificationTokens).where(lt(verificationTokens.expires, sql`now()`)),
    await db.delete(formReturns).where(lt(formReturns.expiresAt, sql`now()`)),
    await db.delete(rateLimits).where(lt(rateLimits.expire, sql`extract(epoch from now()) * 1000`)),
    await db.delete(signInRequests).where(lt(signInRequests.expiresAt, sql`now() - interval '1 day'`)),
  ];
  return gone.reduce((sum, { rowCount }) => sum + (rowCount ?? 0), 0);
}
