import fc from 'fast-check';
import { jStat } from 'jstat';
import { describe, expect, test } from 'vitest';
import { betaChance, betaQuantile, lnGamma } from '../../src/commission/pricing/beta-quantile';
import { calibrateHours, nearestRank } from '../../src/commission/pricing/calibration';
import {
  afterPour,
  coveredFailures,
  expectedFailures,
  failureChance,
  failureChances,
  meanSoundness,
  soundnessInterval,
  soundnessOf,
} from '../../src/commission/pricing/soundness';

const belief = fc.record({
  alpha: fc.double({ min: 1.5, max: 300, noNaN: true }),
  beta: fc.double({ min: 0.2, max: 100, noNaN: true }),
});
const pieces = fc.integer({ min: 1, max: 24 });

/** A belief this strong is a known chance p: the law then is the plain negative binomial. */
const known = (p: number) => ({ alpha: p * 1e9, beta: (1 - p) * 1e9 });

describe('belief in the next pour', () => {
  // Prior Beta(8, 2), then 9 good of 14: Beta(17, 7), mean 0.708333, 1.4375 pours per good one. Exact conjugate formulas.
  test('counts pours like the conjugate formulas', () => {
    const posterior = soundnessOf({ priorSoundness: 0.8, sound: 9, failed: 5 }, 10);
    expect(posterior.alpha).toBeCloseTo(17, 12);
    expect(posterior.beta).toBeCloseTo(7, 12);
    expect(meanSoundness(posterior)).toBeCloseTo(0.708333, 6);
    expect(1 + expectedFailures(1, posterior)).toBeCloseTo(1.4375, 12);
  });

  // Uniform prior, 437 of 980: Beta(438, 544), mean 0.44603. Gelman et al., Bayesian Data Analysis, 3rd ed., p. 37.
  test('agrees with the textbook example of 437 in 980', () => {
    const posterior = soundnessOf({ priorSoundness: 0.5, sound: 437, failed: 543 }, 2);
    expect(posterior).toEqual({ alpha: 438, beta: 544 });
    expect(meanSoundness(posterior)).toBeCloseTo(jStat.beta.mean(438, 544), 12);
    expect(meanSoundness(posterior)).toBeCloseTo(0.446, 3);
  });

  test('a pour more moves the right count', () => {
    expect(afterPour({ alpha: 17, beta: 7 }, 'scrapped')).toEqual({ alpha: 17, beta: 8 });
    expect(afterPour({ alpha: 17, beta: 7 }, 'sound')).toEqual({ alpha: 18, beta: 7 });
  });
});

describe('failures before enough sound pieces', () => {
  // Chance 0.20 a trial: first success on trial 3 0.128, third on trial 7 0.049152, mean 15 trials for 3.
  // Penn State STAT 414, lesson 11.6.
  test('with a known chance is the negative binomial of the textbooks', () => {
    expect(failureChance(2, 1, known(0.2))).toBeCloseTo(0.128, 6);
    expect(failureChance(4, 3, known(0.2))).toBeCloseTo(0.049152, 6);
    expect(3 + expectedFailures(3, known(0.2))).toBeCloseTo(15, 5);
  });

  // p 0.70, 4 wanted: mean 5.714286 pours, six suffice with 0.74431, nine for 95 %. Exact formulas.
  test('pours for four good castings at 0.70', () => {
    const chances = failureChances(4, known(0.7), 12);
    expect(4 + expectedFailures(4, known(0.7))).toBeCloseTo(5.714286, 5);
    expect(chances.slice(0, 3).reduce((sum, chance) => sum + chance, 0)).toBeCloseTo(0.74431, 5);
    expect(4 + coveredFailures(chances, 0.95)).toBe(9);
  });

  test('with an unknown chance agrees with jStat’s beta function', () => {
    fc.assert(
      fc.property(belief, pieces, fc.integer({ min: 0, max: 12 }), ({ alpha, beta }, n, k) => {
        const other =
          jStat.combination(n + k - 1, k) * Math.exp(jStat.betaln(alpha + n, beta + k) - jStat.betaln(alpha, beta));
        expect(failureChance(k, n, { alpha, beta })).toBeCloseTo(other, 9);
      }),
    );
  });

  test('the chances and the lumped tail sum to one', () => {
    fc.assert(
      fc.property(belief, pieces, (soundness, n) => {
        const chances = failureChances(n, soundness, 12);
        expect(chances).toHaveLength(14);
        expect(chances.reduce((sum, chance) => sum + chance, 0)).toBeCloseTo(1, 9);
        expect(Math.min(...chances)).toBeGreaterThanOrEqual(0);
      }),
    );
  });

  test('the expectation is the mean of the listed law', () => {
    const soundness = { alpha: 40, beta: 6 };
    const mean = Array.from({ length: 400 }, (_, k) => k * failureChance(k, 3, soundness)).reduce((a, b) => a + b, 0);
    expect(mean).toBeCloseTo(expectedFailures(3, soundness), 9);
  });

  test('no belief worth the name has no expectation', () =>
    expect(expectedFailures(1, { alpha: 1, beta: 1 })).toBe(Infinity));
});

describe('how far a belief may be off', () => {
  // Beta(17, 7): middle 95 % from 0.515948 to 0.867897. Exact formulas.
  test('the middle 95 % of 17 sound against 7', () => {
    const { low, high } = soundnessInterval({ alpha: 17, beta: 7 }, 0.95);
    expect(low).toBeCloseTo(0.515948, 6);
    expect(high).toBeCloseTo(0.867897, 6);
  });

  // Clopper-Pearson bounds are beta quantiles. 13 of 16 at 95 %: 0.5435 to 0.9595 (R package contingencytables, chapter 2
  // tests). 8 of 10: 0.4931 to 0.96323 at 90 %, 0.4439 to 0.97479 at 95 %, 0.3518 to 0.98915 at 99 % (sintervals).
  // 1 of 29 at 95 %: 0.0009 to 0.1776 (Newcombe 1998, from memory, recomputed).
  test.each([
    [13, 16, 0.95, 0.5435, 0.9595],
    [8, 10, 0.9, 0.4931, 0.96323],
    [8, 10, 0.95, 0.4439, 0.97479],
    [8, 10, 0.99, 0.3518, 0.98915],
    [1, 29, 0.95, 0.0009, 0.1776],
  ])('the exact interval of %d in %d at %d', (x, n, confidence, low, high) => {
    const tail = (1 - confidence) / 2;
    expect(betaQuantile(tail, x, n - x + 1)).toBeCloseTo(low, 4);
    expect(betaQuantile(1 - tail, x + 1, n - x)).toBeCloseTo(high, 4);
  });

  test('agrees with jStat everywhere', () => {
    const shape = fc.double({ min: 1, max: 300, noNaN: true });
    fc.assert(
      fc.property(shape, shape, fc.double({ min: 0.001, max: 0.999, noNaN: true }), (a, b, x) => {
        // jStat ends its continued fraction at a step of 3e-7, so it is good for six places.
        expect(betaChance(x, a, b)).toBeCloseTo(jStat.ibeta(x, a, b), 6);
        expect(lnGamma(a)).toBeCloseTo(jStat.gammaln(a), 8);
        expect(betaChance(betaQuantile(x, a, b), a, b)).toBeCloseTo(x, 8);
      }),
    );
  });
});

describe('calibration of hours', () => {
  // The studio's worked example, fettling of thin blades, n = 8.
  const ratios = [0.82, 0.95, 1.0, 1.04, 1.1, 1.18, 1.31, 1.46];
  const history = ratios.map((ratio) => ({ ratio, scrapped: false }));
  const studio = { p10: 0.85, p50: 1, p90: 1.3 };
  const rules = { priorCount: 8, keepLast: 30 };

  test('nearest rank takes values that were measured', () => {
    expect([0.1, 0.5, 0.9].map((q) => nearestRank(ratios, q))).toEqual([0.82, 1.04, 1.46]);
    expect(() => nearestRank([], 0.5)).toThrow(RangeError);
  });

  test('eight ratios weigh half: 0.835, 1.02, 1.38', () => {
    const result = calibrateHours(history, studio, rules);
    expect(result).toMatchObject({ count: 8, weight: 0.5 });
    expect([result.p10, result.p50, result.p90].map((value) => Number(value.toFixed(6)))).toEqual([0.835, 1.02, 1.38]);
  });

  test('scrapped attempts and all but the last thirty are dropped; without history nothing changes', () => {
    const scrapped = calibrateHours([...history, { ratio: 9, scrapped: true }], studio, rules);
    expect(scrapped.p90).toBeCloseTo(1.38, 9);
    const old = Array.from({ length: 40 }, () => ({ ratio: 5, scrapped: false }));
    const recent = Array.from({ length: 30 }, () => ({ ratio: 1, scrapped: false }));
    expect(calibrateHours([...old, ...recent], studio, rules)).toMatchObject({ count: 30, p50: 1 });
    expect(calibrateHours([], studio, rules)).toMatchObject({ ...studio, weight: 0 });
  });
});
