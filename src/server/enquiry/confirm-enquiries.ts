import { and, eq, isNull } from 'drizzle-orm';
import type { Actor } from '../../commission/permissions';
import { handOverUploads } from './claim-uploads';
import type { CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { users } from '../db/schema/people';
import { queueEnquiryMails } from './enquiry-mails';
import { recordEvent } from '../history';

/**
 * Called when somebody has signed in: every enquiry that waited for this address is theirs now and counts. M1 and M2
 * are queued once, however often this is called. Returns the numbers of the enquiries that were confirmed.
 */
export async function confirmEnquiries(
  tx: Transaction,
  user: { id: string; email: string },
  now: Date,
): Promise<string[]> {
  const rows = await tx
    .update(commissions)
    .set({ customerId: user.id, confirmedAt: now, updatedAt: now })
    .where(and(eq(commissions.email, user.email), isNull(commissions.confirmedAt)))
    .returning();
  const named = rows[0];
  if (named)
    await tx
      .update(users)
      .set({ name: named.customerName })
      .where(and(eq(users.id, user.id), isNull(users.name)));
  for (const row of rows) {
    await handOverUploads(tx, row.id, user.id);
    await welcomeEnquiry(tx, row, null, now);
  }
  return rows.map((row) => row.ref);
}

/** The first line of history and the mails of an enquiry that counts. */
export async function welcomeEnquiry(tx: Transaction, row: CommissionRow, actor: Actor, at: Date): Promise<void> {
  await recordEvent(tx, {
    commissionId: row.id,
    code: 'T1',
    actor,
    actorRole: 'customer',
    to: 'enquiry',
    sentence: actor?.role === 'owner' ? 'The studio wrote down an enquiry.' : 'The enquiry was received.',
    public: true,
    at,
    data: { modelVersion: (row.estimate as { modelVersion?: string }).modelVersion ?? null },
  });
  await queueEnquiryMails(tx, row, at);
}

/** Whose commission an enquiry becomes: the signed-in customer's, or the person's an owner writes it down for. */
export async function customerFor(
  tx: Transaction,
  actor: NonNullable<Actor>,
  person: { email: string; name: string; phone?: string | undefined },
  at: Date,
): Promise<string> {
  if (actor.role === 'customer') return actor.id;
  await tx
    .insert(users)
    .values({ name: person.name, email: person.email, phone: person.phone ?? null, createdAt: at })
    .onConflictDoNothing({ target: users.email });
  const [user] = await tx.select({ id: users.id }).from(users).where(eq(users.email, person.email));
  if (!user) throw new Error('the customer’s row vanished');
  return user.id;
}
