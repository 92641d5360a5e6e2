import { type CostLine, lineUnits, unitCostMinor } from './cost-lines';
import { meanHandFactor } from './cost-distribution';
import { sumHand } from './cost-sums';
import { timeWords } from './form-lines';
import { allocate } from '../money';
import type { CustomerLine, PricedQuote } from './pricing-results';
import type { QuoteDraft } from './quote-draft';

type Weighted = Omit<CustomerLine, 'amountMinor'> & { weight: number };

const costOf = (lines: readonly CostLine[], pieces: number) =>
  lines.reduce((sum, line) => sum + unitCostMinor(line) * lineUnits(line, pieces), 0);
const minutesOf = (lines: readonly CostLine[], pieces: number) =>
  lines.reduce((sum, line) => sum + line.minutes * lineUnits(line, pieces), 0);

const METAL_IDS = new Set(['melt-loss', 'gating', 'metal']);

function metalWords({ massesG, metal, pieces }: QuoteDraft): string {
  const of = (massG: number) => `${massG.toLocaleString('en-GB')} g`;
  return `${metal.name}: ${of(massesG.poured)} poured for ${of(massesG.finished)} finished${pieces > 1 ? ', each' : ''}`;
}

/** One row per kind of work, weighted by its expected cost. */
function weightedRows(draft: QuoteDraft, priced: PricedQuote): Weighted[] {
  const { pieces, pricing } = draft;
  const { sums } = priced;
  const of = (group: CostLine['group']) => draft.lines.filter((line) => line.group === group);
  const mean = meanHandFactor(draft.hand, pricing.handWeights);
  const pours = of('attempt').filter(({ id }) => !METAL_IDS.has(id));
  const metal = draft.lines.filter(({ id }) => METAL_IDS.has(id));
  const row = (id: string, label: string, detail: string, weight: number, repeatsAtRepour = false) => ({
    id,
    label,
    detail,
    weight,
    repeatsAtRepour,
  });
  const minutes = (lines: readonly CostLine[]) => timeWords(minutesOf(lines, pieces));
  const perFailure = sums.attempt + sums.downgrade + sums.lostHand * mean + sums.rushPerRepour;
  const rush = sums.rushOnce + sums.hand * sums.overtimeShare * mean;
  return [
    row('preparation', 'Drawing, pattern and gate A', minutes(of('before-gate')), sums.beforeGate),
    row('pouring', 'Mould and pour', `${minutes(pours)}, and a share of the heat`, costOf(pours, pieces), true),
    row('metal', 'Metal', metalWords(draft), costOf(metal, pieces), true),
    row(
      'repours',
      'Set aside for pours that fail',
      'you never pay for a second pour',
      priced.expectedFailures * perFailure,
    ),
    ...handRows(draft, sums.hand * mean),
    row('sundries', 'Materials', 'abrasives, chemicals, fittings', sums.sundries),
    row('papers', 'Certificate, mark and record', minutes(of('after-gate')), sums.afterGate),
    row('rush', 'Rush', 'a heat of its own and overtime', rush),
  ];
}

/** Each hand line by itself, sharing the commission's whole hand cost as its own minutes share the minutes. */
function handRows(draft: QuoteDraft, handCost: number): Weighted[] {
  const lines = draft.lines.filter(({ group }) => group === 'hand');
  const alone = lines.map((line) => sumHand([line], draft.pieces, draft.pricing.repeatFactor));
  const whole = alone.reduce((sum, item) => sum + item.costMinor, 0);
  return lines.map((line, index) => ({
    id: line.id,
    label: line.label,
    detail: `${timeWords(alone[index]?.minutes ?? 0)} at the bench`,
    weight: whole === 0 ? 0 : (handCost * (alone[index]?.costMinor ?? 0)) / whole,
    repeatsAtRepour: false,
  }));
}

/**
 * The price of the work laid out for the buyer: rows by kind of work, in proportion to their expected cost, summing to
 * `workMinor` (quoted currency) exactly. Rows that cost nothing are left out.
 */
export function customerLines(draft: QuoteDraft, priced: PricedQuote, workMinor: number): CustomerLine[] {
  const rows = weightedRows(draft, priced).filter(({ weight }) => weight > 0);
  const amounts = allocate(
    workMinor,
    rows.map(({ weight }) => weight),
  );
  return rows.map(({ weight: _weight, ...row }, index) => ({ ...row, amountMinor: amounts[index] ?? 0 }));
}
