import { and, count, eq, max, sql } from 'drizzle-orm';
import { DEAL_MOVES, mayMove, type DealMove, type DealState, type Mover } from '../commission/deal';
import { done, refuse, type Outcome } from '../commission/problem';
import type { Actor } from '../commission/permissions';
import type { Db } from './db/client';
import { commissions, events } from './db/schema/commissions';

/** A line of history to be written. `public` lines are shown to the customer. */
export interface NewEvent {
  commissionId: string;
  code: string;
  actor: Actor;
  /** Used when nobody is signed in: the clock, a payment webhook, a guest. */
  actorRole?: string;
  from?: string | null;
  to?: string | null;
  sentence: string;
  public?: boolean;
  data?: Record<string, unknown>;
  at: Date;
}

/** Appends one line of history and wakes the pages that watch this commission. */
export async function recordEvent(db: Db, event: NewEvent): Promise<number> {
  const [row] = await db
    .insert(events)
    .values({
      commissionId: event.commissionId,
      at: event.at,
      code: event.code,
      actorId: event.actor?.id ?? null,
      actorRole: event.actor?.role ?? event.actorRole ?? 'guest',
      from: event.from ?? null,
      to: event.to ?? null,
      sentence: event.sentence,
      public: event.public ?? false,
      data: event.data ?? {},
    })
    .returning({ id: events.id });
  await db.execute(sql`select pg_notify('commission', ${event.commissionId})`);
  return row?.id ?? 0;
}

/** A move of the deal, with the line of history that tells it. */
export interface DealChange extends Omit<NewEvent, 'code' | 'from' | 'to' | 'commissionId'> {
  move: DealMove;
  mover: Mover;
}

/**
 * Moves the deal when it still stands where the caller read it, and writes the history line in the
 * same transaction. Of several rivals one wins; the others get `conflict`.
 */
export async function moveDeal(
  db: Db,
  commission: { id: string; deal: DealState },
  change: DealChange,
): Promise<Outcome<DealState>> {
  if (!mayMove(commission.deal, change.move, change.mover)) {
    return refuse(
      'conflict',
      'This commission has moved on since the page was opened. Reload it to see where it stands.',
    );
  }
  const to: DealState = DEAL_MOVES[change.move].to;
  const moved = await db
    .update(commissions)
    .set({ deal: to, dealBefore: commission.deal, updatedAt: change.at })
    .where(and(eq(commissions.id, commission.id), eq(commissions.deal, commission.deal)))
    .returning({ id: commissions.id });
  if (moved.length === 0) {
    return refuse(
      'conflict',
      'Somebody else changed this commission a moment ago. Reload the page to see where it stands.',
    );
  }
  await recordEvent(db, { ...change, commissionId: commission.id, code: change.move, from: commission.deal, to });
  return done(to);
}

/** How often the deal has made a move, and when last; a piece that comes back is finished and sent a second time. */
export async function timesMoved(
  db: Db,
  commissionId: string,
  move: DealMove,
): Promise<{ times: number; last: Date | null }> {
  const [row] = await db
    .select({ times: count(), last: max(events.at) })
    .from(events)
    .where(and(eq(events.commissionId, commissionId), eq(events.code, move)));
  return row ?? { times: 0, last: null };
}
