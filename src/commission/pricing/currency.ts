import { ceilToStep, halfUp } from '../money';
import type { QuoteCurrency } from './quote-draft';

/** Foreign minor units for one of the studio's, the buffer included: 1.17 with 2 % is 1.1934. */
export function bufferedRate({ rate, buffer }: Pick<QuoteCurrency, 'rate' | 'buffer'>): number {
  return rate * (1 + buffer);
}

/** A work price or stage payment in the quoted currency, up to a whole price step; unchanged in the studio's own. */
export function quotedPrice(minor: number, currency: QuoteCurrency, stepMinor: number): number {
  if (currency.quoted === currency.studio) return minor;
  return ceilToStep(minor * bufferedRate(currency), stepMinor);
}

/** Carriage in the quoted currency, half-up to the minor unit; unchanged in the studio's own. */
export function quotedCarriage(minor: number, currency: QuoteCurrency): number {
  return currency.quoted === currency.studio ? minor : halfUp(minor * bufferedRate(currency));
}
