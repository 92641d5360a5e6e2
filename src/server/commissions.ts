import { eq } from 'drizzle-orm';
import type { Actor, Permission } from '../commission/permissions';
import { may } from '../commission/permissions';
import { done, refuse, type Outcome } from '../commission/problem';
import type { Db, Transaction } from './db/client';
import { commissions } from './db/schema/commissions';

export type CommissionRow = typeof commissions.$inferSelect;

const REF = /^[A-Z]{1,4}-\d{3,6}$/;

/**
 * Loads a commission by its shown number when the actor may do `permission` to it. A commission of
 * somebody else answers exactly like one that does not exist.
 */
export async function findCommission(
  { db }: { db: Db },
  actor: Actor,
  ref: string | undefined,
  permission: Permission,
): Promise<Outcome<CommissionRow>> {
  if (!actor)
    return refuse('sign-in-needed', 'Sign in to see this. We mail you a link and a code; there is no password.');
  const row =
    ref && REF.test(ref) ? (await db.select().from(commissions).where(eq(commissions.ref, ref)))[0] : undefined;
  if (row && may(actor, permission, row)) return done(row);
  return may(actor, permission, { customerId: actor.id })
    ? refuse(
        'not-found',
        'There is no commission of yours with this number. Check the number in our mail, or sign in with the address it was sent to.',
      )
    : refuse('not-allowed', 'Your role at the studio does not include this page.');
}

/** Reads the commission's row and holds it until the transaction ends. */
export async function lockCommission(tx: Transaction, id: string): Promise<CommissionRow> {
  const [row] = await tx.select().from(commissions).where(eq(commissions.id, id)).for('update');
  if (!row) throw new Error(`commission ${id} vanished`);
  return row;
}
