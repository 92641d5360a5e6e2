import { ceilToStep, floorToStep } from '../money';
import type { CostFigures, PricedQuote } from './pricing-results';
import type { PricingConstants } from './rates';

type Steps = Pick<PricingConstants, 'margin' | 'priceStepMinor' | 'rangeStepMinor'>;

/** The price that earns `margin` (a share of price, not of cost) on a cost, not rounded: 125 at 20 % is 156.25. */
export function priceWithMargin(costMinor: number, margin: number): number {
  return costMinor / (1 - margin);
}

/**
 * Prices in minor units, up to a whole price step. Firm = the larger of expected cost with margin and P80 cost without: it
 * earns the margin on average and breaks even in four outcomes of five.
 */
export function pricesFor(cost: CostFigures, { margin, priceStepMinor }: Steps): PricedQuote['prices'] {
  const withMargin = (value: number) => ceilToStep(priceWithMargin(value, margin), priceStepMinor);
  const expectedMinor = withMargin(cost.expected);
  const breakEvenP80Minor = ceilToStep(cost.p80, priceStepMinor);
  return {
    expectedMinor,
    breakEvenP80Minor,
    firmMinor: Math.max(expectedMinor, breakEvenP80Minor),
    p80Minor: withMargin(cost.p80),
    p95Minor: withMargin(cost.p95),
  };
}

/** The range shown to a buyer: the firm price down, and the P95 cost with margin up, to a whole range step. */
export function shownRange(firmMinor: number, cost: CostFigures, steps: Steps): { low: number; high: number } {
  const low = floorToStep(firmMinor, steps.rangeStepMinor);
  const high = ceilToStep(priceWithMargin(cost.p95, steps.margin), steps.rangeStepMinor);
  return { low, high: Math.max(high, ceilToStep(firmMinor, steps.rangeStepMinor)) };
}
