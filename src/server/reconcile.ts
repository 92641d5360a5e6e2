import { and, inArray, lt } from 'drizzle-orm';
import { checkoutSessions } from './db/schema/quotes';
import { reconcileSession } from './payments';
import type { Services } from './services';

const GRACE_MS = 60_000;

/**
 * Asks Stripe about every session that is open or pending here for over a minute, and takes in what it
 * says: a payment whose webhook never came is booked by this. Returns how many sessions changed.
 */
export async function reconcileCheckouts(services: Services): Promise<number> {
  const before = new Date(services.now().getTime() - GRACE_MS);
  const rows = await services.db
    .select({ id: checkoutSessions.id })
    .from(checkoutSessions)
    .where(and(inArray(checkoutSessions.state, ['open', 'pending']), lt(checkoutSessions.createdAt, before)));
  let changed = 0;
  for (const { id } of rows) {
    const outcome = await reconcileSession(services, id);
    if (outcome === 'booked' || outcome === 'expired' || outcome === 'failed' || outcome === 'unmatched') changed += 1;
  }
  return changed;
}
