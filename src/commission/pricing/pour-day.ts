import { chargeG } from './pour-charge';
import type { AlloyRate, PourDayRates } from './rates';

/** One mould ready, or not, for the pour day; earlier in the list means poured first when not all fit. */
export interface ReadyMould {
  ref: string;
  alloy: string;
  pouredG: number;
  dry: boolean;
  approved: boolean;
}

/** One heat: its alloy, pot, moulds, and masses in g. */
export interface PlannedHeat {
  alloy: string;
  crucible: string;
  moulds: string[];
  pouredG: number;
  chargeG: number;
}

export interface PourDayPlan {
  heats: PlannedHeat[];
  leftOut: { ref: string; reason: string }[];
}

type Pot = PourDayRates['crucibles'][number];

function holds(pot: Pot, rates: PourDayRates): number {
  return pot.brimG * rates.crucibleFill;
}

/** The smallest free pot for the charge, or the largest free one when none is large enough. Brass keeps to brass pots. */
function choosePot(free: readonly Pot[], brass: boolean, needG: number, rates: PourDayRates): Pot | undefined {
  const fit = free.filter((pot) => pot.brassOnly === brass).sort((a, b) => a.brimG - b.brimG);
  return fit.find((pot) => holds(pot, rates) >= needG) ?? fit.at(-1);
}

/** Fills a pot with moulds in their order, skipping what no longer fits. */
function fillPot(pot: Pot, moulds: readonly ReadyMould[], alloy: AlloyRate, rates: PourDayRates) {
  const taken: ReadyMould[] = [];
  const over: ReadyMould[] = [];
  let pouredG = 0;
  for (const mould of moulds) {
    const fits = chargeG(pouredG + mould.pouredG, alloy.meltLoss, rates) <= holds(pot, rates);
    (fits ? taken : over).push(mould);
    if (fits) pouredG += mould.pouredG;
  }
  return { taken, over, pouredG };
}

/** Tin bronzes by rising tin, brass after all of them in its own pot: zinc fume spoils the tin bronzes that follow. */
function heatOrder(a: AlloyRate, b: AlloyRate): number {
  return Number(a.brass) - Number(b.brass) || a.tin - b.tin || (a.code < b.code ? -1 : 1);
}

function unready(mould: ReadyMould, alloys: readonly AlloyRate[]): string | null {
  if (!mould.approved) return 'The wax is not approved yet.';
  if (!mould.dry) return 'The mould is damp.';
  return alloys.some((alloy) => alloy.code === mould.alloy) ? null : `The studio does not cast ${mould.alloy}.`;
}

/**
 * Plans one pour day: ready moulds by alloy, one heat and one pot for each, in the order the furnace wants. What cannot be
 * poured is listed with its reason. Each pot is used once.
 */
export function planPourDay(
  ready: readonly ReadyMould[],
  alloys: readonly AlloyRate[],
  rates: PourDayRates,
): PourDayPlan {
  const heats: PlannedHeat[] = [];
  const leftOut: PourDayPlan['leftOut'] = [];
  let free = [...rates.crucibles];
  const able = ready.filter((mould) => {
    const reason = unready(mould, alloys);
    if (reason) leftOut.push({ ref: mould.ref, reason });
    return reason === null;
  });
  for (const alloy of [...alloys].sort(heatOrder)) {
    const moulds = able.filter((mould) => mould.alloy === alloy.code);
    if (moulds.length === 0) continue;
    const totalG = moulds.reduce((sum, mould) => sum + mould.pouredG, 0);
    const pot = choosePot(free, alloy.brass, chargeG(totalG, alloy.meltLoss, rates), rates);
    if (!pot) {
      leftOut.push(...moulds.map(({ ref }) => ({ ref, reason: `No crucible is left for ${alloy.code} today.` })));
      continue;
    }
    const { taken, over, pouredG } = fillPot(pot, moulds, alloy, rates);
    leftOut.push(...over.map(({ ref }) => ({ ref, reason: `The ${alloy.code} heat is full.` })));
    if (taken.length === 0) continue;
    free = free.filter((other) => other !== pot);
    const refs = taken.map(({ ref }) => ref);
    heats.push({
      alloy: alloy.code,
      crucible: pot.code,
      moulds: refs,
      pouredG,
      chargeG: chargeG(pouredG, alloy.meltLoss, rates),
    });
  }
  return { heats, leftOut };
}
