import type { CostLine } from './cost-lines';
import { halfUp } from '../money';
import type { DeskChoices } from './desk-choices';
import { metalLines, type Masses } from './metal-lines';
import type { QuoteMetal } from './quote-draft';

const METAL_LINES: ReadonlySet<string> = new Set(['heat', 'melt-loss', 'gating', 'metal']);

/** True for a line whose amount comes from the masses and the metal's prices, as long as nobody typed another. */
export function followsMasses(line: Pick<CostLine, 'id' | 'driver' | 'minutes'>): boolean {
  return METAL_LINES.has(line.id) && line.driver !== '' && line.minutes === 0;
}

/** Masses and metal that lines are reckoned from. */
export interface Reckoned {
  massesG: Masses;
  metal: QuoteMetal;
}

/**
 * A metal line at other masses or of another metal. A heat whose cost has changed since the draft keeps the draft's: its
 * share then grows with the poured mass.
 */
export function reckonAgain(
  line: CostLine,
  before: Reckoned,
  after: Reckoned,
  { heatMinor, planningLoadG }: Pick<DeskChoices, 'heatMinor' | 'planningLoadG'>,
): CostLine {
  const at = ({ massesG, metal }: Reckoned) =>
    metalLines(massesG, metal, heatMinor, planningLoadG).find((each) => each.id === line.id);
  const [old, now] = [at(before), at(after)];
  if (!old || !now || before.massesG.poured === 0) return line;
  const isSame = line.id !== 'heat' || old.materialsMinor === line.materialsMinor;
  const grown = halfUp((line.materialsMinor * after.massesG.poured) / before.massesG.poured);
  return { ...line, materialsMinor: isSame ? now.materialsMinor : grown, driver: now.driver };
}
