import { and, eq } from 'drizzle-orm';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { findCommission } from '../commissions';
import { ledgerEntries, stagePayments } from '../db/schema/quotes';
import type { Services } from '../services';
import { readStudio, type QuotingStudio } from '../studio';

/** A receipt as its reader sees it. Minor units. */
export interface Receipt {
  receiptNo: number;
  at: Date;
  label: string;
  title: string;
  customer: string;
  /** Number of the buyer's purchase order. */
  poNumber?: string;
  amountMinor: number;
  /** Split as agreed for the stage; null when the money fits no stage. */
  tax: { netMinor: number; taxMinor: number } | null;
  currency: string;
  studio: QuotingStudio;
}

/** Reads one receipt for the customer, an owner or the bookkeeper. */
export async function readReceipt(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  receiptNo: number,
): Promise<Outcome<Receipt>> {
  const found = await findCommission(services, actor, ref, 'money:read');
  if (!found.ok) return found;
  const [row] = await services.db
    .select({ entry: ledgerEntries, stage: stagePayments })
    .from(ledgerEntries)
    .leftJoin(stagePayments, eq(stagePayments.id, ledgerEntries.stagePaymentId))
    .where(and(eq(ledgerEntries.commissionId, found.value.id), eq(ledgerEntries.receiptNo, receiptNo)));
  if (!row) return refuse('not-found', 'There is no receipt of this number on this commission.');
  const { entry, stage } = row;
  return done({
    receiptNo,
    at: entry.at,
    label: stage?.label ?? 'Payment',
    title: found.value.title,
    customer: found.value.customerName,
    ...(found.value.buyer?.poNumber ? { poNumber: found.value.buyer.poNumber } : {}),
    amountMinor: entry.amountMinor,
    tax:
      stage && stage.grossMinor === entry.amountMinor ? { netMinor: stage.netMinor, taxMinor: stage.taxMinor } : null,
    currency: entry.currency,
    studio: await readStudio(services.db),
  });
}
