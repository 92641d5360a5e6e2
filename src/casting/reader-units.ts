/** Which units a reader wants. Everything is stored metric; this only chooses the words. */
export type UnitSystem = 'metric' | 'imperial';

/** Exact by definition: international inch, and international avoirdupois ounce (NIST Handbook 44, appendix C). */
export const MM_PER_INCH = 25.4;
export const G_PER_OUNCE = 28.349523125;

const grouped = (value: number, digits: number) =>
  new Intl.NumberFormat('en-GB', { minimumFractionDigits: digits, maximumFractionDigits: digits }).format(value);

/** A mass in g as words: "720 g", "1.60 kg" from 1,000 g on, or "25.4 oz". */
export function massWords(grams: number, system: UnitSystem): string {
  if (system === 'imperial') return `${grouped(grams / G_PER_OUNCE, 1)} oz`;
  return grams < 1000 ? `${grouped(grams, 0)} g` : `${grouped(grams / 1000, 2)} kg`;
}

/** A length in mm as words: "620 mm", "7.5 mm", or "24.4 in" (two decimals under ten inches). */
export function lengthWords(mm: number, system: UnitSystem): string {
  if (system === 'metric') return `${grouped(mm, Number.isInteger(mm) ? 0 : 1)} mm`;
  const inches = mm / MM_PER_INCH;
  return `${grouped(inches, inches < 10 ? 2 : 1)} in`;
}
