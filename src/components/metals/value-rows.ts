import type { Alloy } from '../../casting/alloys';
import { compositionWords, elementName } from '../../casting/studio-alloys';
import { bandWords, freezingWords, pourWords, shrinkageWords } from './value-words';

/** One line of an alloy's own page. `value` may hold {keys} of sources. */
export type ValueRow = { name: string; value: string; source: string; notes: string[] };

type Sourced = { source: string; notes?: string[] | undefined };
const row = (name: string, value: string, from: Sourced): ValueRow => ({
  name,
  value,
  source: from.source,
  notes: from.notes ?? [],
});

function limitWords(limits: Alloy['limitsPct']['value']): string {
  return Object.entries(limits)
    .map(([symbol, { min, max }]) => {
      if (min !== undefined && max !== undefined) return `${elementName(symbol)} ${min}–${max} %`;
      return `${elementName(symbol)} ${min !== undefined ? `at least ${min}` : `at most ${max}`} %`;
    })
    .join(', ');
}

/** What it is made of. */
export function compositionRows(alloy: Alloy): ValueRow[] {
  return [
    row('Nominal composition', compositionWords(alloy.compositionPct.value), alloy.compositionPct),
    row('Limits', limitWords(alloy.limitsPct.value), alloy.limitsPct),
    ...(alloy.en1982 ? [row('European name (EN 1982)', alloy.en1982.value, alloy.en1982)] : []),
  ];
}

/** How it melts, flows, freezes and shrinks. */
export function castingRows(alloy: Alloy): ValueRow[] {
  const none = { source: 'memory' };
  return [
    row('Density at 20 °C', `${alloy.densityGPerCm3.value} g/cm³`, alloy.densityGPerCm3),
    row('Solidus', `${alloy.solidusC.value} °C`, alloy.solidusC),
    row('Liquidus', `${alloy.liquidusC.value} °C`, alloy.liquidusC),
    row('Freezing range', freezingWords(alloy), { source: 'calc_here' }),
    row('Linear shrinkage', shrinkageWords(alloy), alloy.shrinkagePct ?? none),
    row('Pouring temperature', pourWords(alloy.pourC.value), alloy.pourC),
    row('How it feeds', alloy.feeding, { source: 'practice' }),
    row('What the melt loses', alloy.meltLoss, { source: 'practice' }),
  ];
}

/** Strength, in the state the figures are for. */
export function strengthRows(alloy: Alloy): ValueRow[] {
  const { tensileMpa, yieldMpa, elongationPct, hardness, ...from } = alloy.mechanical;
  const figures = [
    tensileMpa && row('Tensile strength', `${bandWords(tensileMpa)} MPa`, from),
    yieldMpa && row('Yield strength', `${bandWords(yieldMpa)} MPa`, { source: from.source }),
    elongationPct && row('Elongation', `${bandWords(elongationPct)} %`, { source: from.source }),
    hardness && row('Hardness', hardness, { source: from.source }),
  ];
  return figures.filter((figure) => figure !== null && figure !== '');
}

/** What it is good for, and what to mind. */
export function useRows(alloy: Alloy): ValueRow[] {
  const { hammeredEdge, blade, ornament, foodContact, ...from } = alloy.suits;
  return [
    row('Colour', alloy.colour.value, alloy.colour),
    row('Cold-hammered edge', hammeredEdge, from),
    row('Blade', blade, from),
    row('Ornament', ornament, from),
    row('Food contact', foodContact, from),
    row('Hazards in the workshop', alloy.hazards.join(', '), from),
  ];
}
