import { and, eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { ENDED_STATES } from '../../commission/deal';
import type { Problem } from '../../commission/problem';
import type { CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { tray } from '../db/schema/commissions';
import { quotes, stagePayments } from '../db/schema/quotes';
import { recordEvent } from '../history';
import { readBalance } from './ledger';

/** What came in, in minor units of `currency`. */
export interface Incoming {
  stageId: string;
  amountMinor: number;
  currency: string;
}

/** Why money that came in cannot be booked on the stage it was meant for; null when it fits to the penny. */
export async function findMisfit(
  tx: Transaction,
  commission: CommissionRow,
  incoming: Incoming,
  now: Date,
): Promise<Problem | null> {
  const { stageId, amountMinor, currency } = incoming;
  const [row] = await tx
    .select({ state: quotes.state, revision: quotes.revision })
    .from(stagePayments)
    .innerJoin(quotes, eq(quotes.id, stagePayments.quoteId))
    .where(and(eq(stagePayments.id, stageId), eq(stagePayments.commissionId, commission.id)));
  if (!row)
    return {
      code: 'conflict',
      message:
        'Money came in for a stage this commission does not have. Find out from the payer what it is for, or refund it.',
    };
  if (row.state !== 'accepted')
    return {
      code: 'stale',
      message: `Money came in for revision ${row.revision}, which is no longer in force. Refund it, or ask the customer to accept the current quote.`,
    };
  if (ENDED_STATES.has(commission.deal))
    return {
      code: 'stale',
      message: `Money came in for a commission that is ${commission.deal}. Refund it, or agree with the customer to take the commission up again.`,
    };
  const stage = (await readBalance(tx, commission.id, now)).stages.find((each) => each.id === stageId);
  if (stage?.currency !== currency || stage.owedMinor !== amountMinor)
    return {
      code: 'conflict',
      message: `A payment came in whose amount or currency is not what is owed on “${stage?.label ?? 'this stage'}”. Compare the two, then refund it or ask the payer; nothing was guessed.`,
    };
  return null;
}

/** Puts money that fits nowhere before the owner, with a line of history when its commission is known. */
export async function putInTray(
  tx: Transaction,
  commissionId: string | null,
  problem: Problem,
  data: Record<string, unknown>,
  at: Date,
): Promise<void> {
  await tx.insert(tray).values({ id: uuidv7(), commissionId, problem, data, createdAt: at });
  if (!commissionId) return;
  await recordEvent(tx, {
    commissionId,
    code: 'payment-unmatched',
    actor: null,
    actorRole: 'payment',
    sentence: problem.message,
    at,
    data,
  });
}
