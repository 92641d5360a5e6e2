import type { CostSums } from './pricing-results';
import { failureChance, type Soundness } from './soundness';

/** What so many spare moulds cost on average, and how likely a second pour day stays. */
export interface SpareOption {
  spares: number;
  expectedMinor: number;
  secondDayChance: number;
}

/**
 * Weighs spare moulds against a second pour day. A spare that was not needed costs an attempt and its metal's loss; a
 * second day costs a heat of its own less the share already counted. Minor units, not rounded.
 */
export function spareOptions(
  sums: Pick<CostSums, 'pieces' | 'attempt' | 'downgrade'>,
  soundness: Soundness,
  repourDayMinor: number,
  most = 5,
): SpareOption[] {
  return Array.from({ length: most + 1 }, (_, spares) => {
    let within = 0;
    let unneeded = 0;
    for (let failures = 0; failures <= spares; failures++) {
      const chance = failureChance(failures, sums.pieces, soundness);
      within += chance;
      unneeded += (spares - failures) * chance;
    }
    const secondDayChance = Math.max(0, 1 - within);
    const expectedMinor = secondDayChance * repourDayMinor + unneeded * (sums.attempt + sums.downgrade);
    return { spares, expectedMinor, secondDayChance };
  });
}

/** The number of spares that costs least; fewer when two cost the same. */
export function advisedSpares(options: readonly SpareOption[]): number {
  return options.reduce((best, option) => (option.expectedMinor < best.expectedMinor ? option : best), {
    spares: 0,
    expectedMinor: Infinity,
    secondDayChance: 1,
  }).spares;
}
