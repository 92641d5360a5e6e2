import { beforeLoss } from '../../casting/mass';
import { ceilToStep } from '../money';
import type { AlloyRate, PourDayRates } from './rates';

/** Grams to charge so that `pouredG` can be poured: spill allowance, then melt loss, up to a whole step. */
export function chargeG(
  pouredG: number,
  meltLoss: number,
  rates: Pick<PourDayRates, 'spillAllowance' | 'chargeStepG'>,
): number {
  return ceilToStep(beforeLoss(pouredG * rates.spillAllowance, meltLoss), rates.chargeStepG);
}

/** What goes into the crucible, g. */
export interface MakeUp {
  ingotG: number;
  returnsG: number;
  /** Pure tin to bring returns poor in tin back to the alloy; zero for brass. */
  tinG: number;
}

/**
 * Makes up a charge from ingot and returns: at most the allowed share of returns and no more than are there, whole grams.
 * Tin t solves (tin in the charge + t) / (charge + t) = the alloy's tin, and is weighed up to the next gram.
 */
export function makeUp(
  totalG: number,
  alloy: Pick<AlloyRate, 'tin' | 'brass'>,
  returns: { availableG: number; tin: number },
  returnsShare: number,
): MakeUp {
  const returnsG = Math.floor(Math.min(returns.availableG, totalG * returnsShare));
  const ingotG = totalG - returnsG;
  const missing = returnsG * (alloy.tin - returns.tin);
  const tinG = alloy.brass || missing <= 0 ? 0 : ceilToStep(missing / (1 - alloy.tin), 1);
  return { ingotG, returnsG, tinG };
}
