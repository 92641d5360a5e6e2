import { betaQuantile } from './beta-quantile';
import type { Family } from './rates';

/** What the studio believes about one pour: Beta(alpha, beta), counted in sound and failed pours. */
export interface Soundness {
  alpha: number;
  beta: number;
}

/**
 * The belief after the studio's own pours: the parent family's rate counts as `priorPours` pours (conjugate Beta-binomial
 * update). 14 sound and 6 failed on a prior of 0.75 worth four pours give Beta(17, 7).
 */
export function soundnessOf(
  family: Pick<Family, 'priorSoundness' | 'sound' | 'failed'>,
  priorPours: number,
): Soundness {
  return {
    alpha: priorPours * family.priorSoundness + family.sound,
    beta: priorPours * (1 - family.priorSoundness) + family.failed,
  };
}

/** The belief after one more pour. */
export function afterPour(soundness: Soundness, result: 'sound' | 'scrapped'): Soundness {
  return result === 'sound' ? { ...soundness, alpha: soundness.alpha + 1 } : { ...soundness, beta: soundness.beta + 1 };
}

/** Mean chance that the next pour is sound. */
export function meanSoundness({ alpha, beta }: Soundness): number {
  return alpha / (alpha + beta);
}

/** The middle `share` of the belief about one pour: how little a short history says. */
export function soundnessInterval({ alpha, beta }: Soundness, share: number): { low: number; high: number } {
  const tail = (1 - share) / 2;
  return { low: betaQuantile(tail, alpha, beta), high: betaQuantile(1 - tail, alpha, beta) };
}

/**
 * P(F = k): the chance of exactly k failed pours before `pieces` sound ones, soundness unknown (beta negative binomial):
 * C(n + k - 1, k) B(alpha + n, beta + k) / B(alpha, beta), built up by ratios so that nothing overflows.
 */
export function failureChance(failures: number, pieces: number, { alpha, beta }: Soundness): number {
  let chance = 1;
  for (let i = 0; i < pieces; i++) chance *= (alpha + i) / (alpha + beta + i);
  for (let k = 1; k <= failures; k++) {
    chance *= ((pieces + k - 1) / k) * ((beta + k - 1) / (alpha + beta + pieces + k - 1));
  }
  return chance;
}

/** P(F = 0) to P(F = listed), and last the whole rest, which the cost model treats as listed + 1 failures. */
export function failureChances(pieces: number, soundness: Soundness, listed: number): number[] {
  const chances = Array.from({ length: listed + 1 }, (_, k) => failureChance(k, pieces, soundness));
  const rest = 1 - chances.reduce((sum, chance) => sum + chance, 0);
  return [...chances, Math.max(0, rest)];
}

/** E[F] = n beta / (alpha - 1), exact, with no tail cut. Infinite when alpha is one or less. */
export function expectedFailures(pieces: number, { alpha, beta }: Soundness): number {
  return alpha > 1 ? (pieces * beta) / (alpha - 1) : Infinity;
}

/** The smallest k with P(F <= k) at least `probability`, from the list of chances (the tail counts as its last entry). */
export function coveredFailures(chances: readonly number[], probability: number): number {
  let sum = 0;
  for (const [k, chance] of chances.entries()) {
    sum += chance;
    if (sum >= probability - 1e-12) return k;
  }
  return chances.length - 1;
}
