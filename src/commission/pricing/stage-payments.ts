import { ceilToStep, floorToStep, share } from '../money';
import type { CostSums, StagePayment } from './pricing-results';
import type { PricingConstants } from './rates';

/** Stage payments in the studio's currency before tax, and the committed costs they answer to; minor units. */
export interface StagePlan {
  depositMinor: number;
  /** Zero when there is no second stage. */
  gateMinor: number;
  /** Cost committed when work starts, and before fettling starts with as many re-pours as four in five need. */
  committedAtStartMinor: number;
  committedBeforeFettlingMinor: number;
  /** Committed but not covered before fettling, because a cap or a dropped stage left it open. */
  shortfallMinor: number;
}

/** c2: one-offs before gate A, every piece poured and its metal, and `covered` re-pours. */
function committedBeforeFettling(sums: CostSums, covered: number): number {
  const firstPours = sums.pieces * (sums.attempt + sums.metal) + sums.rushOnce;
  return sums.beforeGate + firstPours + covered * (sums.attempt + sums.downgrade + sums.rushPerRepour);
}

/**
 * Splits a work price into deposit and gate payment so that they cover what is committed. Small work has one deposit,
 * min(max(25 %, c2), 50 %); larger work min(max(25 %, c1), 50 %) and the rest of c2 at gate A. Each up to a price step.
 */
export function planStages(
  sums: CostSums,
  workMinor: number,
  covered: number,
  { deposits, priceStepMinor }: Pick<PricingConstants, 'deposits' | 'priceStepMinor'>,
): StagePlan {
  const atStart = sums.beforeGate + sums.boughtMetal;
  const beforeFettling = committedBeforeFettling(sums, covered);
  const single = workMinor < deposits.oneStageBelowMinor;
  const up = (value: number) => ceilToStep(value, priceStepMinor);
  const wanted = up(Math.max(deposits.minShare * workMinor, single ? beforeFettling : atStart));
  const depositMinor = Math.min(wanted, up(deposits.capShare * workMinor), workMinor);
  const rest = single ? 0 : up(Math.max(0, beforeFettling - depositMinor));
  const gate = Math.min(rest, floorToStep(workMinor - depositMinor, priceStepMinor));
  const gateMinor = gate < deposits.smallestStageMinor ? 0 : gate;
  return {
    depositMinor,
    gateMinor,
    committedAtStartMinor: atStart,
    committedBeforeFettlingMinor: beforeFettling,
    shortfallMinor: Math.max(0, beforeFettling - depositMinor - gateMinor),
  };
}

/** Deposit, gate payment (left out when zero) and the balance, with tax; they sum to the totals exactly. */
export function stagePayments(
  depositMinor: number,
  gateMinor: number,
  totals: { netMinor: number; taxMinor: number },
  rate: number,
): StagePayment[] {
  const stage = (id: StagePayment['id'], label: string, netMinor: number, taxMinor = share(netMinor, rate)) => ({
    id,
    label,
    netMinor,
    taxMinor,
    grossMinor: netMinor + taxMinor,
  });
  const stages = [stage('deposit', 'Deposit', depositMinor)];
  if (gateMinor > 0) stages.push(stage('gate-a', 'Stage payment at gate A', gateMinor));
  const paid = stages.reduce((sum, item) => sum + item.netMinor, 0);
  const taxed = stages.reduce((sum, item) => sum + item.taxMinor, 0);
  return [...stages, stage('balance', 'Balance before dispatch', totals.netMinor - paid, totals.taxMinor - taxed)];
}
