import { unitCostMinor } from './cost-lines';
import { formatMoney } from '../money';
import type { PricedQuote, Warning } from './pricing-results';
import type { QuoteDraft } from './quote-draft';

const stop = (code: string, message: string): Warning => ({ code, message, blocking: true });
const mind = (code: string, message: string): Warning => ({ code, message, blocking: false });

function lineWarnings(draft: QuoteDraft): Warning[] {
  return draft.lines
    .filter((line) => unitCostMinor(line) === 0 && !line.zeroReason?.trim())
    .map((line) => stop('zero-line', `"${line.label}" costs nothing: every line needs hours or a reason for zero.`));
}

function massWarnings({ massesG }: QuoteDraft): Warning[] {
  if (massesG.finished <= massesG.cast && massesG.cast <= massesG.poured) return [];
  return [stop('masses', 'Masses must not fall from finished to cast to poured: check the three figures.')];
}

type Priced = Omit<PricedQuote, 'warnings'>;

function rangeWarnings(draft: QuoteDraft, priced: Priced): Warning[] {
  const range = draft.shownRange;
  if (!range || (priced.workMinor >= range.lowMinor && priced.workMinor <= range.highMinor)) return [];
  if (draft.outOfRangeReason?.trim()) return [];
  const [low, high] = [range.lowMinor, range.highMinor].map((minor) =>
    formatMoney(minor, priced.studio, { pence: 'whole' }),
  );
  return [
    stop('outside-range', `The buyer was shown ${low} to ${high}. Write why this quote differs; they will read it.`),
  ];
}

function moneyWarnings(draft: QuoteDraft, priced: Priced): Warning[] {
  const warnings: Warning[] = [];
  if (priced.workMinor < priced.cost.expected)
    warnings.push(mind('below-cost', 'At this price the studio expects to lose money on the work.'));
  else if (priced.chanceOfLoss > 0.2)
    warnings.push(
      mind('risky', 'More than one outcome in five costs more than this price. The safer price covers four in five.'),
    );
  if (priced.exposure.shortfallMinor > 0) {
    const missing = formatMoney(priced.exposure.shortfallMinor, priced.studio);
    warnings.push(
      mind('exposed', `Before fettling starts ${missing} of committed cost is not covered by stage payments.`),
    );
  }
  if (draft.validityDays > usualValidityDays(draft, priced))
    warnings.push(
      mind(
        'validity',
        `Metal is a large share of this cost: hold the price ${draft.pricing.metalValidityDays} days at most.`,
      ),
    );
  return warnings;
}

/** Days a quote is usually good for: the shorter hold when metal is more than its share of the expected cost. */
export function usualValidityDays(draft: QuoteDraft, priced: Pick<PricedQuote, 'sums' | 'cost'>): number {
  const metalShare = priced.sums.boughtMetal / priced.cost.expected;
  const { metalShare: limit, metalValidityDays, validityDays } = draft.pricing;
  return metalShare > limit ? metalValidityDays : validityDays;
}

/** What the owner must deal with (blocking) or should know before sending the quote. */
export function quoteWarnings(draft: QuoteDraft, priced: Priced): Warning[] {
  return [
    ...lineWarnings(draft),
    ...massWarnings(draft),
    ...rangeWarnings(draft, priced),
    ...moneyWarnings(draft, priced),
  ];
}
