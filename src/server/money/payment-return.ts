import { and, eq } from 'drizzle-orm';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { findCommission } from '../commissions';
import { checkoutSessions, ledgerEntries, stagePayments } from '../db/schema/quotes';
import type { Services } from '../services';

/** What is known here of one payment page; amounts in minor units. */
export interface PaymentReturn {
  state: 'paid' | 'pending' | 'open' | 'failed' | 'expired';
  label: string;
  amountMinor: number;
  currency: string;
  receiptNo: number | null;
}

const STATES = ['paid', 'pending', 'open', 'failed', 'expired'] as const;

/** Reads where a payment stands for its payer. It only reads: booking is the webhook's work, however this page is reached. */
export async function readPaymentReturn(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  sessionId: string | null,
): Promise<Outcome<PaymentReturn>> {
  const found = await findCommission(services, actor, ref, 'payment:pay');
  if (!found.ok) return found;
  const [row] = await services.db
    .select({ session: checkoutSessions, label: stagePayments.label })
    .from(checkoutSessions)
    .innerJoin(stagePayments, eq(stagePayments.id, checkoutSessions.stagePaymentId))
    .where(and(eq(checkoutSessions.id, sessionId ?? ''), eq(checkoutSessions.commissionId, found.value.id)));
  if (!row)
    return refuse(
      'not-found',
      'There is no such payment on this commission. Its page shows what is due and what is paid.',
    );
  const { session, label } = row;
  const entries = await services.db.select().from(ledgerEntries).where(eq(ledgerEntries.commissionId, found.value.id));
  const entry = entries.find((each) => (each.cause as { session?: string }).session === session.id);
  const state = STATES.find((each) => each === session.state) ?? 'open';
  return done({
    state,
    label,
    amountMinor: session.amountMinor,
    currency: session.currency,
    receiptNo: entry?.receiptNo ?? null,
  });
}
