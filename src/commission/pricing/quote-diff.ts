import { atRepour, type CostLine, unitCostMinor } from './cost-lines';
import { canonicalJson } from '../canonical-json';
import type { QuoteDraft } from './quote-draft';

/** One difference between two quotes, in words; `forBuyer` differences may be mailed, others stay at the desk. */
export interface QuoteChange {
  field: string;
  label: string;
  before: string;
  after: string;
  forBuyer: boolean;
}

const percent = (value: number) => `${Number((value * 100).toFixed(1))} %`;
const money = (minor: number) => (minor / 100).toFixed(2);

/** What is compared beside the cost lines: name, words for a reader, whether a buyer may read it. */
const FACTS: { field: string; label: string; forBuyer: boolean; words: (draft: QuoteDraft) => string }[] = [
  { field: 'title', label: 'Piece', forBuyer: true, words: (d) => d.title },
  { field: 'specification', label: 'What is included', forBuyer: true, words: (d) => d.specification.join('; ') },
  { field: 'pieces', label: 'Number of pieces', forBuyer: true, words: (d) => String(d.pieces) },
  { field: 'metal', label: 'Alloy', forBuyer: true, words: (d) => d.metal.name },
  {
    field: 'mass',
    label: 'Finished mass',
    forBuyer: true,
    words: (d) => `${d.massesG.finished} g, within ${percent(d.massTolerance)}`,
  },
  {
    field: 'carriage',
    label: 'Carriage',
    forBuyer: true,
    words: (d) => `${money(d.carriage.minor)} (${d.carriage.words})`,
  },
  { field: 'currency', label: 'Currency', forBuyer: true, words: (d) => d.currency.quoted },
  {
    field: 'tax',
    label: 'Tax',
    forBuyer: true,
    words: (d) => (d.tax.kind === 'export' ? 'export, none' : percent(d.tax.rate)),
  },
  { field: 'validity', label: 'Good for', forBuyer: true, words: (d) => `${d.validityDays} days` },
  { field: 'rounds', label: 'Rounds of change included', forBuyer: true, words: (d) => String(d.includedRounds) },
  {
    field: 'dates',
    label: 'Weeks from deposit',
    forBuyer: true,
    words: (d) => `${d.dateRange.earliestWeeks} to ${d.dateRange.latestWeeks}`,
  },
  { field: 'terms', label: 'Terms', forBuyer: true, words: (d) => d.termsVersion },
  { field: 'mark', label: 'Mark', forBuyer: true, words: (d) => d.mark },
  { field: 'rush', label: 'Rush', forBuyer: true, words: (d) => (d.rush ? 'a heat of its own' : 'none') },
  { field: 'margin', label: 'Margin', forBuyer: false, words: (d) => percent(d.pricing.margin) },
  {
    field: 'soundness',
    label: 'Soundness',
    forBuyer: false,
    words: (d) => `${d.soundness.familyName}: ${d.soundness.alpha} sound, ${d.soundness.beta} failed`,
  },
  {
    field: 'hand',
    label: 'Hour factors',
    forBuyer: false,
    words: (d) => `${d.hand.p10} / ${d.hand.p50} / ${d.hand.p90}`,
  },
  { field: 'price', label: 'Price choice', forBuyer: false, words: (d) => canonicalJson(d.price) },
];

function lineWords(line: CostLine | undefined): string {
  if (!line) return 'not in the quote';
  const again = atRepour(line) === 'no' ? '' : `, ${atRepour(line)} at a re-pour`;
  const times = line.per === 'piece' ? ` on ${line.onPieces ?? 'every'} piece` : '';
  return `${line.minutes} min, ${money(unitCostMinor(line))}${times}${again}`;
}

/** What changed from quote `a` to quote `b`, buyer's facts first, then cost lines by id in the order of `b`. */
export function diffQuotes(a: QuoteDraft, b: QuoteDraft): QuoteChange[] {
  const facts = FACTS.map(({ words, ...fact }) => ({ ...fact, before: words(a), after: words(b) }));
  const ids = new Set([...b.lines, ...a.lines].map((line) => line.id));
  const lines = [...ids].map((id) => {
    const [before, after] = [a, b].map((draft) => draft.lines.find((line) => line.id === id));
    const label = after?.label ?? before?.label ?? id;
    return { field: `line:${id}`, label, before: lineWords(before), after: lineWords(after), forBuyer: false };
  });
  return [...facts, ...lines].filter((change) => change.before !== change.after);
}
