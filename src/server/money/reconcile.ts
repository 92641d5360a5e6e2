import { and, inArray, lt } from 'drizzle-orm';
import { checkoutSessions } from '../db/schema/quotes';
import { reconcileSession, type EventOutcome } from './payments';
import type { Services } from '../services';

const GRACE_MS = 60_000;
const CHANGED: ReadonlySet<EventOutcome> = new Set(['booked', 'expired', 'failed', 'unmatched']);

/**
 * Asks Stripe about every session that is open or pending here for over a minute, and takes in what it
 * says: a payment whose webhook never came is booked by this. Returns how many sessions changed.
 *
 * @throws AggregateError at the end, when some could not be looked up; the others are done by then
 */
export async function reconcileCheckouts(services: Services): Promise<number> {
  const before = new Date(services.now().getTime() - GRACE_MS);
  const rows = await services.db
    .select({ id: checkoutSessions.id })
    .from(checkoutSessions)
    .where(and(inArray(checkoutSessions.state, ['open', 'pending']), lt(checkoutSessions.createdAt, before)));
  let changed = 0;
  const failures: unknown[] = [];
  for (const { id } of rows) {
    try {
      if (CHANGED.has(await reconcileSession(services, id))) changed += 1;
    } catch (error) {
      services.log.error({ err: error, session: id }, 'a payment page could not be looked up');
      failures.push(error);
    }
  }
  if (failures.length > 0)
    throw new AggregateError(failures, `${failures.length} payment pages could not be looked up`);
  return changed;
}
