import { and, eq, inArray, isNull, sql } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { balanceOf, type Balance } from '../../commission/balance';
import type { Db, Transaction } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { checkoutSessions, ledgerEntries, numberSeries, quotes, stagePayments } from '../db/schema/quotes';

export type LedgerEntry = typeof ledgerEntries.$inferSelect;
export type StagePayment = typeof stagePayments.$inferSelect;

/** A line to be booked; `providerId` is unique, so booking the same money twice books it once. */
export interface NewEntry {
  commissionId: string;
  stagePaymentId: string | null;
  kind: LedgerEntry['kind'];
  amountMinor: number;
  currency: string;
  providerId: string;
  cause: Record<string, unknown>;
  at: Date;
}

/**
 * Books one line. A received line takes the next receipt number; the series' row is locked until the
 * transaction ends, so numbers have no gaps. Returns null when this `providerId` is booked already.
 */
export async function bookEntry(tx: Transaction, entry: NewEntry): Promise<LedgerEntry | null> {
  const [known] = await tx
    .select({ id: ledgerEntries.id })
    .from(ledgerEntries)
    .where(eq(ledgerEntries.providerId, entry.providerId));
  if (known) return null;
  const receiptNo = entry.kind === 'received' ? await nextNumber(tx, 'receipt') : null;
  const [row] = await tx
    .insert(ledgerEntries)
    .values({ id: uuidv7(), ...entry, receiptNo })
    .returning();
  return row ?? null;
}

async function nextNumber(tx: Transaction, series: string): Promise<number> {
  const [row] = await tx
    .update(numberSeries)
    .set({ last: sql`${numberSeries.last} + 1` })
    .where(eq(numberSeries.series, series))
    .returning({ last: numberSeries.last });
  if (!row) throw new Error(`the number series ${series} is missing`);
  return row.last;
}

/** Stage payments of the accepted quote, in order; empty before acceptance. */
export async function acceptedStages(db: Db, commissionId: string): Promise<StagePayment[]> {
  const rows = await db
    .select({ stage: stagePayments })
    .from(stagePayments)
    .innerJoin(quotes, eq(quotes.id, stagePayments.quoteId))
    .where(and(eq(stagePayments.commissionId, commissionId), eq(quotes.state, 'accepted')))
    .orderBy(stagePayments.position);
  return rows.map((row) => row.stage);
}

const PAY_WITHIN_DAYS = { 'gate-a': 7, 'before-dispatch': 14, rework: 14 } as const;

/**
 * Makes the stages of these triggers due, each after the days it is given, or after the buyer's days of credit when those
 * are more; one that is due already keeps its day.
 */
export async function callInStages(
  tx: Transaction,
  commissionId: string,
  triggers: readonly (keyof typeof PAY_WITHIN_DAYS)[],
  at: Date,
): Promise<void> {
  const [row] = await tx.select({ buyer: commissions.buyer }).from(commissions).where(eq(commissions.id, commissionId));
  for (const stage of await acceptedStages(tx, commissionId)) {
    const trigger = triggers.find((each) => each === stage.trigger);
    if (!trigger) continue;
    const days = Math.max(PAY_WITHIN_DAYS[trigger], row?.buyer?.netDays ?? 0);
    const dueAt = new Date(at.getTime() + days * 86_400_000);
    await tx
      .update(stagePayments)
      .set({ dueAt })
      .where(and(eq(stagePayments.id, stage.id), isNull(stagePayments.dueAt)));
  }
}

/** What is paid, due, overdue and to come on one commission at `now`. */
export async function readBalance(db: Db, commissionId: string, now: Date): Promise<Balance> {
  return (await readBalances(db, [commissionId], now)).get(commissionId)!;
}

/** The same for many commissions in three queries. */
export async function readBalances(db: Db, ids: readonly string[], now: Date): Promise<Map<string, Balance>> {
  if (ids.length === 0) return new Map();
  const list = [...ids];
  const stages = await db
    .select({ stage: stagePayments })
    .from(stagePayments)
    .innerJoin(quotes, eq(quotes.id, stagePayments.quoteId))
    .where(and(inArray(stagePayments.commissionId, list), eq(quotes.state, 'accepted')));
  const ledger = await db.select().from(ledgerEntries).where(inArray(ledgerEntries.commissionId, list));
  const pending = await db
    .select({ stageId: checkoutSessions.stagePaymentId })
    .from(checkoutSessions)
    .where(and(inArray(checkoutSessions.commissionId, list), eq(checkoutSessions.state, 'pending')));
  const onTheirWay = new Set(pending.map((row) => row.stageId));
  return new Map(
    list.map((id) => [
      id,
      balanceOf(
        stages.filter((row) => row.stage.commissionId === id).map((row) => row.stage),
        ledger.filter((line) => line.commissionId === id),
        onTheirWay,
        now,
      ),
    ]),
  );
}
