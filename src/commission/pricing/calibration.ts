import type { HandFactor } from './rates';

/** Nearest-rank percentile: the smallest value with at least a share `q` of the values at or below it. Throws when empty. */
export function nearestRank(values: readonly number[], q: number): number {
  const sorted = [...values].sort((a, b) => a - b);
  const value = sorted[Math.max(0, Math.ceil(q * sorted.length - 1e-9) - 1)];
  if (value === undefined) throw new RangeError('A percentile needs at least one value.');
  return value;
}

/** One finished operation: actual over estimated hours, oldest first. Scrapped attempts do not count. */
export interface HoursRatio {
  ratio: number;
  scrapped: boolean;
}

export interface Calibration extends HandFactor {
  /** How many ratios spoke, and their weight against the studio's own factors. */
  count: number;
  weight: number;
}

/**
 * Hour factors from the studio's own actuals: nearest-rank P10, P50 and P90 of the last ratios, mixed with the factors in
 * use by weight n / (n + priorCount). For the owner to see; open quotes keep theirs.
 */
export function calibrateHours(
  history: readonly HoursRatio[],
  studio: HandFactor,
  { priorCount, keepLast }: { priorCount: number; keepLast: number },
): Calibration {
  const ratios = history
    .filter((item) => !item.scrapped)
    .slice(-keepLast)
    .map((item) => item.ratio);
  const weight = ratios.length / (ratios.length + priorCount);
  const mix = (q: number, own: number) =>
    ratios.length === 0 ? own : weight * nearestRank(ratios, q) + (1 - weight) * own;
  return {
    p10: mix(0.1, studio.p10),
    p50: mix(0.5, studio.p50),
    p90: mix(0.9, studio.p90),
    count: ratios.length,
    weight,
  };
}
