import { eq } from 'drizzle-orm';
import type Stripe from 'stripe';
import type { Db, Transaction } from '../db/client';
import { checkoutSessions, stagePayments } from '../db/schema/quotes';

export type CheckoutRow = typeof checkoutSessions.$inferSelect;
export type CheckoutState = 'open' | 'pending' | 'failed' | 'expired' | 'paid';

/** How far along each state is. News may arrive late and out of order, so a session only ever moves on. */
const RANK: Record<CheckoutState, number> = { open: 0, pending: 1, failed: 2, expired: 2, paid: 3 };

/** Writes down a session that exists at Stripe; one that is known already stays as it is. */
export async function keepSession(
  db: Db,
  session: Stripe.Checkout.Session,
  facts: { commissionId: string; stagePaymentId: string; at: Date },
): Promise<void> {
  const [stage] = await db.select().from(stagePayments).where(eq(stagePayments.id, facts.stagePaymentId));
  if (!stage) return;
  await db
    .insert(checkoutSessions)
    .values({
      id: session.id,
      commissionId: facts.commissionId,
      stagePaymentId: stage.id,
      quoteId: stage.quoteId,
      amountMinor: session.amount_total ?? 0,
      currency: (session.currency ?? '').toUpperCase(),
      url: session.url ?? '',
      createdAt: facts.at,
      expiresAt: new Date(session.expires_at * 1000),
    })
    .onConflictDoNothing();
}

/** Moves a session on to `state`. False when it is there already, or further. */
export async function moveSession(tx: Transaction, sessionId: string, state: CheckoutState): Promise<boolean> {
  const [row] = await tx
    .select({ state: checkoutSessions.state })
    .from(checkoutSessions)
    .where(eq(checkoutSessions.id, sessionId))
    .for('update');
  if (!row || RANK[row.state as CheckoutState] >= RANK[state]) return false;
  await tx.update(checkoutSessions).set({ state }).where(eq(checkoutSessions.id, sessionId));
  return true;
}
