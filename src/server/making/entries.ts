import { and, eq, like, sql } from 'drizzle-orm';
import type { Transaction } from '../db/client';
import { events } from '../db/schema/commissions';

/**
 * The line of history an entry of the bench made, found by the id the page gave it: a second sending of the same entry
 * is answered like the first, also when the work has gone on meanwhile. `code` may end in % for any line of that kind.
 */
export async function findEntry(
  tx: Transaction,
  commissionId: string,
  code: string,
  clientId: string,
): Promise<typeof events.$inferSelect | null> {
  const [row] = await tx
    .select()
    .from(events)
    .where(
      and(
        eq(events.commissionId, commissionId),
        like(events.code, code),
        sql`${events.data} ->> 'clientId' = ${clientId}`,
      ),
    )
    .limit(1);
  return row ?? null;
}
