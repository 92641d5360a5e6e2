import { and, asc, eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { quoteDraftSchema } from '../../commission/pricing/quote-draft';
import { routeOfPiece } from '../../commission/making/route-of-quote';
import type { Db, Transaction } from '../db/client';
import { attempts, pieces } from '../db/schema/making';
import { quotes } from '../db/schema/quotes';

export type PieceRow = typeof pieces.$inferSelect;
export type AttemptRow = typeof attempts.$inferSelect;

/**
 * Opens the pieces of a booked commission from its accepted quote: one row a wanted casting, with its
 * route and the promised mass. Pieces that are open already stay as they are. Returns the routes, in order.
 */
export async function openPieces(tx: Transaction, commissionId: string, at: Date): Promise<PieceRow['route'][]> {
  const [quote] = await tx
    .select({ body: quotes.body })
    .from(quotes)
    .where(and(eq(quotes.commissionId, commissionId), eq(quotes.state, 'accepted')));
  if (!quote) throw new Error(`commission ${commissionId} is booked without an accepted quote`);
  const draft = quoteDraftSchema.parse((quote.body as { draft: unknown }).draft);
  const rows = Array.from({ length: draft.pieces }, (_, index) => ({
    id: uuidv7(),
    commissionId,
    number: index + 1,
    route: routeOfPiece(draft.lines, index + 1),
    targetMassG: draft.massesG.finished,
    toleranceG: Math.round(draft.massesG.finished * draft.massTolerance),
    updatedAt: at,
  }));
  await tx.insert(pieces).values(rows).onConflictDoNothing();
  return rows.map((row) => row.route);
}

/** The pieces of a commission in their order. */
export function readPieces(db: Db, commissionId: string): Promise<PieceRow[]> {
  return db.select().from(pieces).where(eq(pieces.commissionId, commissionId)).orderBy(asc(pieces.number));
}

/** Every mould poured or to be poured for a commission, in order. */
export function readAttempts(db: Db, commissionId: string): Promise<AttemptRow[]> {
  return db.select().from(attempts).where(eq(attempts.commissionId, commissionId)).orderBy(asc(attempts.number));
}
