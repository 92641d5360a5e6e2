import { beforeLoss } from '../../casting/mass';
import { type CostLine, costLine } from './cost-lines';
import { halfUp } from '../money';
import type { QuoteMetal } from './quote-draft';

/** Masses of one piece in g: finished, as cast, and poured with its gating. */
export interface Masses {
  finished: number;
  cast: number;
  poured: number;
}

/** Grams lost to dross and fume when `pouredG` reach the mould: poured / (1 - loss) - poured, to the gram. */
export function meltLossG(pouredG: number, meltLoss: number): number {
  return halfUp(beforeLoss(pouredG, meltLoss) - pouredG);
}

/** Metal bought for the first pour of every piece, minor units: poured mass plus melt loss at the ingot price. */
export function boughtMetalMinor(pieces: number, massesG: Masses, metal: QuoteMetal): number {
  const chargedG = massesG.poured + meltLossG(massesG.poured, metal.meltLoss);
  return halfUp((pieces * chargedG * metal.ingotMinorPerKg) / 1000);
}

/** What a scrapped casting loses in value on its way to the returns, minor units. */
export function scrapDowngradeMinor(massesG: Masses, metal: QuoteMetal): number {
  return halfUp((massesG.cast * (metal.ingotMinorPerKg - metal.returnsMinorPerKg)) / 1000);
}

const grams = (value: number) => `${value.toLocaleString('en-GB')} g`;
const perKg = (minor: number) => `${(minor / 100).toFixed(2)} per kg`;

/** The heat's share, melt loss and gating of one attempt, and the metal in one sound piece. Amounts half-up. */
export function metalLines(massesG: Masses, metal: QuoteMetal, heatMinor: number, planningLoadG: number): CostLine[] {
  const lostG = meltLossG(massesG.poured, metal.meltLoss);
  const gatingG = Math.max(0, massesG.poured - massesG.cast);
  const downgrade = metal.ingotMinorPerKg - metal.returnsMinorPerKg;
  return [
    costLine({
      id: 'heat',
      label: 'Share of a heat',
      group: 'attempt',
      materialsMinor: halfUp((heatMinor * massesG.poured) / planningLoadG),
      driver: `${grams(massesG.poured)} of a ${grams(planningLoadG)} heat`,
    }),
    costLine({
      id: 'melt-loss',
      label: 'Metal lost in the melt',
      group: 'attempt',
      materialsMinor: halfUp((lostG * metal.ingotMinorPerKg) / 1000),
      driver: `${grams(lostG)} at ${perKg(metal.ingotMinorPerKg)}`,
    }),
    costLine({
      id: 'gating',
      label: 'Gating back to the returns',
      group: 'attempt',
      materialsMinor: halfUp((gatingG * downgrade) / 1000),
      driver: `${grams(gatingG)} at ${perKg(downgrade)} less`,
    }),
    costLine({
      id: 'metal',
      label: 'Metal in the piece',
      group: 'metal',
      materialsMinor: halfUp((massesG.cast * metal.ingotMinorPerKg) / 1000),
      driver: `${grams(massesG.cast)} at ${perKg(metal.ingotMinorPerKg)}`,
    }),
  ];
}
