/** Coefficients of Lanczos' approximation to the gamma function, g = 7, n = 9 (as printed in Numerical Recipes' later texts). */
const LANCZOS = [
  0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059,
  12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7,
];

/** Natural logarithm of the gamma function for x > 0. */
export function lnGamma(x: number): number {
  if (x < 0.5) return Math.log(Math.PI / Math.sin(Math.PI * x)) - lnGamma(1 - x);
  const z = x - 1;
  const series = LANCZOS.slice(1).reduce((sum, c, i) => sum + c / (z + i + 1), LANCZOS[0] ?? 0);
  const t = z + 7.5;
  return 0.5 * Math.log(2 * Math.PI) + (z + 0.5) * Math.log(t) - t + Math.log(series);
}

/** The continued fraction of the incomplete beta function, by Lentz's method (Abramowitz and Stegun 26.5.8). */
function betaFraction(x: number, a: number, b: number): number {
  const TINY = 1e-300;
  let c = 1;
  let d = 1 / Math.max(TINY, 1 - ((a + b) * x) / (a + 1));
  let fraction = d;
  for (let m = 1; m < 500; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    const before = fraction;
    for (const term of [even, odd]) {
      d = 1 / (1 + term * d || TINY);
      c = 1 + term / c || TINY;
      fraction *= d * c;
    }
    if (Math.abs(fraction - before) < 1e-15 * Math.abs(fraction)) break;
  }
  return fraction;
}

/** P(X <= x) for X ~ Beta(a, b): the regularised incomplete beta function. */
export function betaChance(x: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  const front = Math.exp(lnGamma(a + b) - lnGamma(a) - lnGamma(b) + a * Math.log(x) + b * Math.log(1 - x));
  if (x < (a + 1) / (a + b + 2)) return (front * betaFraction(x, a, b)) / a;
  return 1 - (front * betaFraction(1 - x, b, a)) / b;
}

/** The x with P(X <= x) = q for X ~ Beta(a, b), by halving to the last digit. */
export function betaQuantile(q: number, a: number, b: number): number {
  let [low, high] = [0, 1];
  for (let i = 0; i < 60; i++) {
    const middle = (low + high) / 2;
    if (betaChance(middle, a, b) < q) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
