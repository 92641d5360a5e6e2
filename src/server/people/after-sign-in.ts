import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Actor } from '../../commission/permissions';
import { endSessions } from '../auth/session';
import { confirmEnquiries } from '../enquiry/confirm-enquiries';
import type { Transaction } from '../db/client';
import { invitations, users } from '../db/schema/people';
import type { Services } from '../services';

type User = NonNullable<Actor>;

/** What an address proves by signing in, each done in the sign-in's own transaction. */
const CONSEQUENCES: ((tx: Transaction, user: User, services: Services) => Promise<unknown>)[] = [
  (tx, user, { now }) => confirmEnquiries(tx, user, now()),
];

/** Gives an invited person their role, then does everything that waited for this address to be confirmed. */
export async function afterSignIn(
  tx: Transaction,
  services: Services,
  { email, session }: { email: string; session: string },
): Promise<User> {
  const [row] = await tx.select().from(users).where(eq(users.email, email));
  if (!row) throw new Error('Auth.js signed in nobody');
  const user = await takeInvitation(tx, row, session);
  for (const follow of CONSEQUENCES) await follow(tx, user, services);
  return user;
}

async function takeInvitation(tx: Transaction, row: typeof users.$inferSelect, session: string): Promise<User> {
  const [invitation] = await tx
    .update(invitations)
    .set({ acceptedAt: sql`now()` })
    .where(and(eq(invitations.email, row.email), isNull(invitations.acceptedAt)))
    .returning();
  if (!invitation) return { id: row.id, role: row.role, email: row.email, name: row.name };
  const name = row.name ?? invitation.name;
  await tx
    .update(users)
    .set({ role: invitation.role, name, givenName: row.givenName ?? name.split(' ')[0] })
    .where(eq(users.id, row.id));
  await endSessions(tx, row.id, session);
  return { id: row.id, role: invitation.role, email: row.email, name };
}
