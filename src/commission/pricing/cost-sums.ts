import { type CostLine, lineUnits, timeCostMinor, unitCostMinor } from './cost-lines';
import { halfUp } from '../money';
import { boughtMetalMinor, scrapDowngradeMinor } from './metal-lines';
import type { CostSums } from './pricing-results';
import type { QuoteDraft } from './quote-draft';

function totalMinor(lines: readonly CostLine[], pieces: number): number {
  return lines.reduce((sum, line) => sum + unitCostMinor(line) * lineUnits(line, pieces), 0);
}

/** Hand lines that share an hourly rate and a number of pieces, so that their repeats are rounded together. */
function repeatGroups(lines: readonly CostLine[], pieces: number): CostLine[][] {
  const groups = new Map<string, CostLine[]>();
  for (const line of lines) {
    const key = `${line.rateMinorPerHour} x ${lineUnits(line, pieces)}`;
    groups.set(key, [...(groups.get(key) ?? []), line]);
  }
  return [...groups.values()];
}

/**
 * Hand work on all pieces: minor units and minutes. Lines that take the repeat factor are added up per hourly rate and
 * number of pieces; pieces two and later take the sum of their minutes times the factor, to the whole minute. Materials
 * repeat whole.
 */
export function sumHand(lines: readonly CostLine[], pieces: number, repeatFactor: number) {
  const repeats = (line: CostLine) => line.takesRepeatFactor && lineUnits(line, pieces) > 1;
  const plain = lines.filter((line) => !repeats(line));
  let costMinor = totalMinor(plain, pieces);
  let minutes = plain.reduce((sum, line) => sum + line.minutes * lineUnits(line, pieces), 0);
  for (const group of repeatGroups(lines.filter(repeats), pieces)) {
    const [{ rateMinorPerHour, ...line }] = group as [CostLine];
    const later = lineUnits(line, pieces) - 1;
    const first = group.reduce((sum, item) => sum + item.minutes, 0);
    const again = halfUp(first * repeatFactor);
    const materials = group.reduce((sum, item) => sum + item.materialsMinor, 0);
    costMinor += group.reduce((sum, item) => sum + unitCostMinor(item), 0);
    costMinor += later * (timeCostMinor(again, rateMinorPerHour) + materials);
    minutes += first + later * again;
  }
  return { costMinor, minutes };
}

/** What dedicated heats add: their whole cost less the shares already counted, once and at each re-pour. */
function rushSums(draft: Pick<QuoteDraft, 'rush' | 'lines' | 'pieces' | 'pricing'>) {
  if (!draft.rush) return { rushOnce: 0, rushPerRepour: 0, overtimeShare: 0 };
  const shareMinor = draft.lines
    .filter((line) => line.id === 'heat')
    .reduce((sum, line) => sum + unitCostMinor(line), 0);
  const { heatMinor, heats } = draft.rush;
  return {
    rushOnce: Math.max(0, heats * heatMinor - draft.pieces * shareMinor),
    rushPerRepour: Math.max(0, heatMinor - shareMinor),
    overtimeShare: draft.pricing.overtimeShare,
  };
}

/** The draft's lines as the sums the model works with, minor units. Lines are rounded one by one, sums are exact. */
export function sumLines(draft: QuoteDraft): CostSums {
  const { lines, pieces, pricing } = draft;
  const of = (group: CostLine['group']) => lines.filter((line) => line.group === group);
  const perUnit = (group: CostLine['group']) => of(group).reduce((sum, line) => sum + unitCostMinor(line), 0);
  const fettling = lines.filter((line) => line.lostWhenLate).reduce((sum, line) => sum + unitCostMinor(line), 0);
  return {
    pieces,
    beforeGate: totalMinor(of('before-gate'), pieces),
    afterGate: totalMinor(of('after-gate'), pieces),
    attempt: perUnit('attempt'),
    metal: perUnit('metal'),
    hand: sumHand(of('hand'), pieces, pricing.repeatFactor).costMinor,
    sundries: totalMinor(of('sundries'), pieces),
    downgrade: scrapDowngradeMinor(draft.massesG, draft.metal),
    lostHand: draft.lateShare * pricing.lostFettlingShare * fettling,
    boughtMetal: boughtMetalMinor(pieces, draft.massesG, draft.metal),
    ...rushSums(draft),
  };
}
