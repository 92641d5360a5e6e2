import { z } from 'zod';

/** The currencies a price may be quoted in. Each has two decimals, so a minor unit is a hundredth. */
export const currencySchema = z.enum(['GBP', 'EUR', 'USD']);
export type Currency = z.infer<typeof currencySchema>;

/** Money as stored everywhere: a whole number of minor units (pence, cents). May be negative for a refund. */
export const minorSchema = z.number().int().safe();

/** Money that cannot be negative, in minor units. */
export const amountMinorSchema = minorSchema.min(0, 'An amount cannot be less than zero.');

/**
 * Sums in floating point miss a whole number by far less than this; a true remainder in minor units is never as small.
 * It keeps 2,016 / 0.96 = 2,100.0000000000002 from being rounded up to the next step.
 */
const SLACK = 1e-6;

/** Rounds to a whole number, a half going up (away from minus infinity): 2.5 to 3, -2.5 to -2. */
export function halfUp(value: number): number {
  return Math.floor(value + 0.5 + SLACK) || 0;
}

/** Rounds up to the next multiple of `step`; a value that is a multiple already stays. */
export function ceilToStep(value: number, step: number): number {
  return Math.ceil((value - SLACK) / step) * step || 0;
}

/** Rounds down to a multiple of `step`; a value that is a multiple already stays. */
export function floorToStep(value: number, step: number): number {
  return Math.floor((value + SLACK) / step) * step || 0;
}

/** A rate applied to an amount in minor units, half-up: tax on a document line, for instance. */
export function share(amountMinor: number, rate: number): number {
  return halfUp(amountMinor * rate);
}

/**
 * Splits a whole amount over weights so that the parts are whole and sum to it exactly: each part is rounded down, then
 * the missing units go to the largest remainders, the earlier one first. All weights zero: everything to the first.
 */
export function allocate(amountMinor: number, weights: readonly number[]): number[] {
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  if (total <= 0) return weights.map((_, index) => (index === 0 ? amountMinor : 0));
  const exact = weights.map((weight) => (amountMinor * weight) / total);
  const parts = exact.map(Math.floor);
  const missing = amountMinor - parts.reduce((sum, part) => sum + part, 0);
  const order = exact
    .map((value, index) => ({ index, rest: value - Math.floor(value) }))
    .sort((a, b) => b.rest - a.rest || a.index - b.index);
  for (const { index } of order.slice(0, missing)) parts[index] = (parts[index] ?? 0) + 1;
  return parts;
}

export interface MoneyStyle {
  locale?: string;
  /** 'whole' leaves out the pence when they are zero. */
  pence?: 'always' | 'whole';
}

/** Money in words of the reader's locale, with its sign: formatMoney(219000, 'GBP') = '£2,190.00'. */
export function formatMoney(minor: number, currency: Currency, style: MoneyStyle = {}): string {
  const digits = style.pence === 'whole' && minor % 100 === 0 ? 0 : 2;
  return new Intl.NumberFormat(style.locale ?? 'en-GB', {
    style: 'currency',
    currency,
    minimumFractionDigits: digits,
    maximumFractionDigits: digits,
  }).format(minor / 100);
}
