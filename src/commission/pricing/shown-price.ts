import { formatMoney, share } from '../money';
import type { Estimate } from './pricing-results';

type Taxed = Pick<Estimate, 'currency' | 'pricesShown' | 'tax'>;

const percent = (rate: number) => `${Math.round(rate * 1000) / 10} %`;

/** An amount before tax as this buyer is shown it: private people at home see it with tax. */
export function shownMinor({ pricesShown, tax }: Taxed, minor: number): number {
  return pricesShown === 'inclusive' ? minor + share(minor, tax.rate) : minor;
}

/** Says what tax a shown amount holds. */
export function taxWords({ pricesShown, tax }: Taxed): string {
  if (tax.kind === 'export') return 'no VAT, as it leaves the country; duty and tax at your border are yours';
  return pricesShown === 'inclusive' ? `with VAT at ${percent(tax.rate)}` : `before VAT at ${percent(tax.rate)}`;
}

/** Whole pounds, euros or dollars where they are whole. */
export function moneyWords(estimate: Pick<Estimate, 'currency'>, minor: number): string {
  return formatMoney(minor, estimate.currency, { pence: 'whole' });
}

/** The range as this buyer is shown it: "£2,628 to £3,528". */
export function rangeWords(estimate: Taxed & Pick<Estimate, 'rangeMinor'>): string {
  const { low, high } = estimate.rangeMinor;
  return `${moneyWords(estimate, shownMinor(estimate, low))} to ${moneyWords(estimate, shownMinor(estimate, high))}`;
}

/** A difference with its sign, as this buyer is shown it: "−£40", "+£25", "no difference". */
export function differenceWords(estimate: Taxed, minor: number): string {
  if (minor === 0) return 'no difference';
  return `${minor < 0 ? '−' : '+'}${moneyWords(estimate, shownMinor(estimate, Math.abs(minor)))}`;
}

/** The date range: "8 to 12 weeks". */
export function weeksWords({ weeks }: Pick<Estimate, 'weeks'>): string {
  const { earliestWeeks, latestWeeks } = weeks;
  return earliestWeeks === latestWeeks ? `${latestWeeks} weeks` : `${earliestWeeks} to ${latestWeeks} weeks`;
}
