import { expectedCost, meanHandFactor, type HandWeights } from './cost-distribution';
import type { CostSums } from './pricing-results';
import type { HandFactor } from './rates';
import { expectedFailures, type Soundness } from './soundness';

/** How far the pouring of a commission has come. `poured` counts every attempt, scrapped ones too. */
export interface PourProgress {
  poured: number;
  scrapped: number;
  sound: number;
}

/** Cost committed before fettling starts: one-offs before gate A, every attempt, scrapped metal's loss, sound metal. */
export function committedMinor(sums: CostSums, { poured, scrapped, sound }: PourProgress): number {
  const attempts = poured * sums.attempt + scrapped * (sums.downgrade + sums.rushPerRepour);
  return sums.beforeGate + attempts + sound * sums.metal + (poured > 0 ? sums.rushOnce : 0);
}

/** Net payments received less committed cost; below zero the studio is lending. */
export function exposureMinor(receivedNetMinor: number, committed: number): number {
  return receivedNetMinor - committed;
}

/**
 * Expected cost from here to the end, before fettling has begun: `sound` pieces are done pouring, the others still need
 * their attempts, and the belief in `soundness` already counts the pours so far. Minor units, not rounded.
 */
export function costToFinish(
  sums: CostSums,
  progress: PourProgress,
  soundness: Soundness,
  hand: HandFactor,
  weights: HandWeights,
): number {
  const left = Math.max(0, sums.pieces - progress.sound);
  const ahead = { ...sums, beforeGate: 0, pieces: left, rushOnce: progress.poured > 0 ? 0 : sums.rushOnce };
  const rushedAgain = progress.poured > 0 ? left * sums.rushPerRepour : 0;
  return expectedCost(ahead, expectedFailures(left, soundness), meanHandFactor(hand, weights)) + rushedAgain;
}

/** Margin now expected on a price, as a share of it: what is committed plus what finishing will cost. */
export function expectedMargin(workMinor: number, committed: number, toFinish: number): number {
  return (workMinor - committed - toFinish) / workMinor;
}
