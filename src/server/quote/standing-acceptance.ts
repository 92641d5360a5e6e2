import { and, eq } from 'drizzle-orm';
import type { Db } from '../db/client';
import { acceptances, quotes } from '../db/schema/quotes';

/**
 * The acceptance that stands: that of the quote now accepted. One whose agreement lapsed for want of its first
 * payment stays as evidence, but binds nobody.
 */
export async function standingAcceptance(
  db: Db,
  commissionId: string,
): Promise<typeof acceptances.$inferSelect | null> {
  const [row] = await db
    .select({ acceptance: acceptances })
    .from(acceptances)
    .innerJoin(quotes, eq(quotes.id, acceptances.quoteId))
    .where(and(eq(acceptances.commissionId, commissionId), eq(quotes.state, 'accepted')));
  return row?.acceptance ?? null;
}
