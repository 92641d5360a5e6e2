import type { Currency } from '../money';
import { bufferedRate } from './currency';
import { committedMinor, costToFinish, expectedMargin, exposureMinor, type PourProgress } from './exposure';
import type { PricedQuote } from './pricing-results';
import type { QuoteDraft } from './quote-draft';
import { afterPour, type Soundness } from './soundness';

/** How one mould of a commission came out; `late` when the fault showed only after fettling had begun. */
export interface PourSoFar {
  poured: boolean;
  result: 'sound' | 'scrapped' | 'second' | null;
  late: boolean;
}

/** A payment stage and what was received on it, quoted currency, minor units; `grossMinor` includes tax. */
export interface PaidStage {
  netMinor: number;
  grossMinor: number;
  paidMinor: number;
}

/** What a commission is expected to earn as it stands. Studio's currency, minor units, without tax. */
export interface MarginNow {
  currency: Currency;
  /** Share of the work price: when it was quoted, and with the pours so far. */
  quoted: number;
  now: number;
  workMinor: number;
  /** What is committed and what finishing is expected to cost. */
  committedMinor: number;
  toFinishMinor: number;
  receivedNetMinor: number;
  /** Received less committed; below zero the studio is lending. */
  exposureMinor: number;
}

/**
 * The margin now expected on an accepted quote: its own lines and beliefs, with this commission's pours counted in. Hours
 * at the bench stay as quoted; a fault found late costs half the fettling, as the model reckons it.
 */
export function marginNow(
  { draft, priced }: { draft: QuoteDraft; priced: PricedQuote },
  pours: readonly PourSoFar[],
  paid: readonly PaidStage[],
): MarginNow {
  const progress: PourProgress = {
    poured: pours.filter((pour) => pour.poured).length,
    scrapped: pours.filter((pour) => pour.result === 'scrapped').length,
    sound: pours.filter((pour) => pour.result === 'sound' || pour.result === 'second').length,
  };
  const belief = pours
    .filter((pour) => pour.result !== null)
    .reduce<Soundness>(
      (soundness, pour) => afterPour(soundness, pour.result === 'sound' ? 'sound' : 'scrapped'),
      draft.soundness,
    );
  const lostHours =
    pours.filter((pour) => pour.result === 'scrapped' && pour.late).length * lostFettling(draft, priced);
  const committed = committedMinor(priced.sums, progress) + lostHours;
  const toFinish = costToFinish(priced.sums, progress, belief, draft.hand, draft.pricing.handWeights);
  const receivedNetMinor = Math.round(netReceived(paid) / studioRate(draft));
  return {
    currency: priced.studio,
    quoted: priced.expectedMargin,
    now: expectedMargin(priced.workMinor, committed, toFinish),
    workMinor: priced.workMinor,
    committedMinor: committed,
    toFinishMinor: toFinish,
    receivedNetMinor,
    exposureMinor: exposureMinor(receivedNetMinor, committed),
  };
}

/** Hand cost one late fault throws away; the model's own figure is that times the chance of a late fault. */
function lostFettling(draft: QuoteDraft, priced: PricedQuote): number {
  return draft.lateShare === 0 ? 0 : Math.round(priced.sums.lostHand / draft.lateShare);
}

function studioRate({ currency }: QuoteDraft): number {
  return currency.quoted === currency.studio ? 1 : bufferedRate(currency);
}

function netReceived(paid: readonly PaidStage[]): number {
  return paid.reduce(
    (sum, stage) => sum + (stage.grossMinor === 0 ? 0 : (stage.paidMinor * stage.netMinor) / stage.grossMinor),
    0,
  );
}
