import { inArray } from 'drizzle-orm';
import { currencySchema } from '../../commission/money';
import type { CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { readBalance, type LedgerEntry } from './ledger';
import { queueMail } from '../outbox';
import type { Services } from '../services';

/** Queues M12: the receipt of one stage payment, and with the first one the place in the year. */
export async function queueReceiptMail(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  entry: LedgerEntry,
): Promise<void> {
  const now = services.now();
  const balance = await readBalance(tx, commission.id, now);
  const stage = balance.stages.find((each) => each.id === entry.stagePaymentId);
  const following = balance.stages.find((each) => each.owedMinor > 0);
  const booked = commission.deal === 'agreed';
  const currency = currencySchema.parse(entry.currency);
  await queueMail(tx, {
    letter: 'M12',
    to: commission.email,
    cause: `M12:${entry.id}`,
    commissionId: commission.id,
    at: now,
    data: {
      ref: commission.ref,
      title: commission.title,
      name: commission.customerName,
      booked,
      label: stage?.label ?? 'Payment',
      amount: { minor: entry.amountMinor, currency },
      receiptNo: entry.receiptNo ?? 0,
      paidAt: entry.at.toISOString(),
      ...(commission.leavesFrom && commission.leavesTo && commission.leavesTo >= now.toISOString().slice(0, 10)
        ? { leaves: { from: commission.leavesFrom, to: commission.leavesTo } }
        : {}),
      ...(booked ? { place: await placeInQueue(tx) } : {}),
      ...(following ? { toCome: { amount: { minor: balance.toComeMinor, currency }, next: following.label } } : {}),
      next: nextSentence(commission, following !== undefined),
    },
  });
}

async function placeInQueue(tx: Transaction): Promise<number> {
  const booked = await tx
    .select({ id: commissions.id })
    .from(commissions)
    .where(inArray(commissions.deal, ['booked']));
  return Math.max(1, booked.length);
}

function nextSentence(commission: CommissionRow, moreToCome: boolean): string {
  if (commission.deal === 'agreed')
    return 'We write again when your piece is about to be started. You need do nothing until then.';
  if (commission.deal === 'finished' && !moreToCome)
    return 'Everything is paid. We pack your piece and write when the carrier has it.';
  if (commission.deal === 'held') return 'Your commission stays on hold as agreed; nothing else changes.';
  return 'The work goes on; your commission’s page shows each stage with its photos.';
}
