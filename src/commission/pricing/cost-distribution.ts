import type { Bin, CostFigures, CostSums } from './pricing-results';
import type { HandFactor } from './rates';

/** One way a commission may go: so many failed pours, hours this many times the estimate, its chance and its cost. */
export interface Outcome {
  failures: number;
  handFactor: number;
  probability: number;
  costMinor: number;
}

export type HandWeights = readonly [number, number, number];

/** Sums of cumulated chances miss the true value by less than this. */
const SLACK = 1e-12;

/**
 * Cost(k, L) = O + n(A + m) + S + H L + k(A + d + lambda L), minor units, not rounded. Rush adds its heats once and at each
 * re-pour, and overtime to H.
 */
export function costOf(sums: CostSums, failures: number, handFactor: number): number {
  const firm = sums.beforeGate + sums.afterGate + sums.pieces * (sums.attempt + sums.metal) + sums.sundries;
  const hand = sums.hand * (1 + sums.overtimeShare) * handFactor;
  const perFailure = sums.attempt + sums.downgrade + sums.lostHand * handFactor + sums.rushPerRepour;
  return firm + sums.rushOnce + hand + failures * perFailure;
}

/** Mean of the three hour factors. */
export function meanHandFactor(hand: HandFactor, weights: HandWeights): number {
  return weights[0] * hand.p10 + weights[1] * hand.p50 + weights[2] * hand.p90;
}

/** E = O + n(A + m) + S + H mu + E[F](A + d + lambda mu): exact, with the mean of the failures and of the hours. */
export function expectedCost(sums: CostSums, meanFailures: number, meanHand: number): number {
  return costOf(sums, meanFailures, meanHand);
}

/** Every outcome of failures x hour scenario with its chance, cheapest first. */
export function listOutcomes(
  sums: CostSums,
  chances: readonly number[],
  hand: HandFactor,
  weights: HandWeights,
): Outcome[] {
  const scenarios = [
    { handFactor: hand.p10, weight: weights[0] },
    { handFactor: hand.p50, weight: weights[1] },
    { handFactor: hand.p90, weight: weights[2] },
  ];
  return chances
    .flatMap((chance, failures) =>
      scenarios.map(({ handFactor, weight }) => ({
        failures,
        handFactor,
        probability: chance * weight,
        costMinor: costOf(sums, failures, handFactor),
      })),
    )
    .sort((a, b) => a.costMinor - b.costMinor);
}

/** The smallest cost whose cumulated chance reaches `q` (outcomes cheapest first), minor units, not rounded. */
export function costQuantile(outcomes: readonly Outcome[], q: number): number {
  let sum = 0;
  for (const outcome of outcomes) {
    sum += outcome.probability;
    if (sum >= q - SLACK) return outcome.costMinor;
  }
  return outcomes.at(-1)?.costMinor ?? 0;
}

/** Chance that the work costs more than `priceMinor`. */
export function chanceAbove(outcomes: readonly Outcome[], priceMinor: number): number {
  return outcomes
    .filter((outcome) => outcome.costMinor > priceMinor + 1e-6)
    .reduce((sum, outcome) => sum + outcome.probability, 0);
}

/** Expected cost and the three percentiles. */
export function costFigures(outcomes: readonly Outcome[], expected: number): CostFigures {
  return {
    expected,
    p50: costQuantile(outcomes, 0.5),
    p80: costQuantile(outcomes, 0.8),
    p95: costQuantile(outcomes, 0.95),
  };
}

/** Steps a chart's columns may have: these times 1, 10, 100 and 1,000 units of the currency, in minor units. */
const STEPS = [100, 1000, 10_000, 100_000].flatMap((decade) =>
  [1, 1.5, 2, 2.5, 3, 4, 5, 6, 8].map((times) => times * decade),
);
const FEWEST = 6;
/** A column under one in two hundred is drawn as nothing. */
const EMPTY = 0.005;

/**
 * Columns for a chart: equal steps from the cheapest outcome to the one that 99 in 100 stay below, at most `most` of them;
 * the last column also holds everything dearer. The chances sum to one. The hours are known at three points only, so
 * narrow columns would show teeth that no pour has: the finest step that leaves the fewest columns empty is taken.
 */
export function distributionBins(outcomes: readonly Outcome[], most = 14): Bin[] {
  const steps = STEPS.filter((step) => columnCount(outcomes, step) <= most);
  const narrow = steps.filter((step) => columnCount(outcomes, step) >= FEWEST);
  const widest = Math.max(1, (costQuantile(outcomes, 0.99) - lowest(outcomes)) / (most - 1));
  const choices = (narrow.length > 0 ? narrow : [steps[0] ?? widest]).map((step) => columns(outcomes, step));
  return choices.reduce((best, bins) => (empties(bins) < empties(best) ? bins : best));
}

function empties(bins: readonly Bin[]): number {
  return bins.filter(({ probability }) => probability < EMPTY).length;
}

function lowest(outcomes: readonly Outcome[]): number {
  return outcomes[0]?.costMinor ?? 0;
}

function columnCount(outcomes: readonly Outcome[], step: number): number {
  const start = Math.floor(lowest(outcomes) / step) * step;
  return Math.max(1, Math.floor((costQuantile(outcomes, 0.99) - start) / step) + 1);
}

function columns(outcomes: readonly Outcome[], step: number): Bin[] {
  const start = Math.floor(lowest(outcomes) / step) * step;
  const count = columnCount(outcomes, step);
  const bins = Array.from({ length: count }, (_, index) => ({
    fromMinor: start + index * step,
    toMinor: start + (index + 1) * step,
    probability: 0,
  }));
  for (const { costMinor, probability } of outcomes) {
    const bin = bins[Math.min(count - 1, Math.floor((costMinor - start) / step))];
    if (bin) bin.probability += probability;
  }
  return bins;
}
