import { costLine, unitCostMinor, type CostLine } from './cost-lines';
import { chosenCurrency, chosenMetal, namingMetal, rushOf, type DeskChoices } from './desk-choices';
import { followsMasses, reckonAgain } from './follow-masses';
import { unflatten } from '../input-fields';
import type { Desk, DeskLine } from './desk';
import type { PriceChoice, QuoteDraft } from './quote-draft';

/** A line as text to show in the desk's table. */
export interface DeskLineFields {
  id: string;
  label: string;
  group: CostLine['group'];
  minutes: string;
  rateMinorPerHour: string;
  materialsMinor: string;
  zeroReason: string;
  follows: boolean;
  drop: boolean;
}

/** Everything the desk's form shows, as text. */
export interface DeskFields {
  version: string;
  title: string;
  specification: string;
  pieces: string;
  finishedMassG: string;
  castMassG: string;
  pouredMassG: string;
  alloy: string;
  currency: string;
  tax: QuoteDraft['tax']['kind'];
  rush: boolean;
  massTolerance: string;
  lines: DeskLineFields[];
  margin: string;
  price: PriceChoice['kind'];
  ownMinor: string;
  ownReason: string;
  carriageMinor: string;
  carriageWords: string;
  validityDays: string;
  includedRounds: string;
  earliestWeeks: string;
  latestWeeks: string;
  mark: string;
  outOfRangeReason: string;
}

/** The row at the end of the table on which another line can be written. */
export const BLANK_LINE: DeskLineFields = {
  id: '',
  label: '',
  group: 'after-gate',
  minutes: '',
  rateMinorPerHour: '',
  materialsMinor: '',
  zeroReason: '',
  follows: false,
  drop: false,
};

const major = (minor: number) => (minor / 100).toFixed(2);
const percent = (share: number) => String(Number((share * 100).toFixed(4)));

/** The desk's fields from a draft: minutes as hours, minor units as whole ones, shares as per cent. */
export function deskFields(draft: QuoteDraft, version: number): DeskFields {
  return {
    version: String(version),
    title: draft.title,
    specification: draft.specification.join('\n'),
    pieces: String(draft.pieces),
    finishedMassG: String(draft.massesG.finished),
    castMassG: String(draft.massesG.cast),
    pouredMassG: String(draft.massesG.poured),
    alloy: draft.metal.code,
    currency: draft.currency.quoted,
    tax: draft.tax.kind,
    rush: draft.rush !== null,
    massTolerance: percent(draft.massTolerance),
    lines: [...draft.lines.map(lineFields), BLANK_LINE],
    margin: percent(draft.pricing.margin),
    price: draft.price.kind,
    ownMinor: draft.price.kind === 'own' ? major(draft.price.workMinor) : '',
    ownReason: draft.price.kind === 'own' ? draft.price.reason : '',
    carriageMinor: major(draft.carriage.minor),
    carriageWords: draft.carriage.words,
    validityDays: String(draft.validityDays),
    includedRounds: String(draft.includedRounds),
    earliestWeeks: String(draft.dateRange.earliestWeeks),
    latestWeeks: String(draft.dateRange.latestWeeks),
    mark: draft.mark,
    outOfRangeReason: draft.outOfRangeReason ?? '',
  };
}

function lineFields(line: CostLine): DeskLineFields {
  return {
    id: line.id,
    label: line.label,
    group: line.group,
    minutes: line.minutes === 0 ? '' : (line.minutes / 60).toFixed(2),
    rateMinorPerHour: line.rateMinorPerHour === 0 ? '' : major(line.rateMinorPerHour),
    materialsMinor: line.materialsMinor === 0 ? '' : major(line.materialsMinor),
    zeroReason: line.zeroReason ?? '',
    follows: followsMasses(line),
    drop: false,
  };
}

/**
 * The draft with what was typed at the desk put in. A line keeps what the table does not show.
 *
 * @param live the desk's own scripts take the tick off a metal line at the first key typed into its amount; a plain form
 *   cannot, so there an amount that is neither the draft's nor the reckoned one counts as typed
 */
export function applyDesk(draft: QuoteDraft, desk: Desk, choices: DeskChoices, live = false): QuoteDraft {
  const massesG = { finished: desk.finishedMassG, cast: desk.castMassG, poured: desk.pouredMassG };
  const metal = chosenMetal(draft, desk.alloy, choices);
  const again = (line: CostLine) => reckonAgain(line, draft, { massesG, metal }, choices);
  return {
    ...draft,
    title: desk.title,
    specification: namingMetal(desk.specification, metal, choices),
    pieces: desk.pieces,
    metal,
    massesG,
    massTolerance: desk.massTolerance,
    lines: applyLines(draft.lines, desk.lines, again, live),
    rush: rushOf(draft, desk.rush, desk.pieces * massesG.poured, choices),
    currency: chosenCurrency(draft, desk.currency, choices),
    tax: { ...draft.tax, kind: desk.tax },
    pricing: { ...draft.pricing, margin: desk.margin },
    price: priceChoice(desk),
    carriage: { minor: desk.carriageMinor, words: desk.carriageWords },
    validityDays: desk.validityDays,
    includedRounds: desk.includedRounds,
    dateRange: { earliestWeeks: desk.earliestWeeks, latestWeeks: desk.latestWeeks },
    mark: desk.mark,
    outOfRangeReason: desk.outOfRangeReason ?? null,
  };
}

function priceChoice(desk: Desk): PriceChoice {
  if (desk.price !== 'own') return { kind: desk.price };
  return { kind: 'own', workMinor: desk.ownMinor ?? 0, reason: desk.ownReason ?? '' };
}

function applyLines(
  before: readonly CostLine[],
  typed: readonly DeskLine[],
  again: (line: CostLine) => CostLine,
  live: boolean,
): CostLine[] {
  const taken = new Set(before.map((line) => line.id));
  return typed.map(({ id, drop: _drop, follows, zeroReason, ...figures }, index) => {
    const known = before.find((line) => line.id === id);
    const reckoned = known && follows ? again(known) : null;
    if (reckoned && (live || [known!.materialsMinor, reckoned.materialsMinor].includes(figures.materialsMinor)))
      return { ...reckoned, label: figures.label, group: figures.group };
    const base = known ?? costLine({ id: freeId(taken, index), label: figures.label, group: figures.group });
    const isSameWork = base.minutes === figures.minutes && base.materialsMinor === figures.materialsMinor;
    // What an amount was reckoned from is no longer true once another amount is typed over it.
    const line = { ...base, ...figures, driver: isSameWork ? base.driver : '' };
    return { ...line, zeroReason: unitCostMinor(line) === 0 ? (zeroReason ?? null) : null };
  });
}

function freeId(taken: Set<string>, index: number): string {
  let number = index + 1;
  while (taken.has(`line-${number}`)) number += 1;
  const id = `line-${number}`;
  taken.add(id);
  return id;
}

/**
 * The desk's fields with what a refused plain form had typed put over them, so that nothing typed is lost.
 *
 * @param typed names as the form sends them ("lines.0.minutes"), values as text
 */
export function fieldsWithTyped(fields: DeskFields, typed: Record<string, string | string[]>): DeskFields {
  const nested = unflatten(typed) as Partial<Record<keyof DeskFields, unknown>>;
  const text = Object.entries(nested).filter(([name, value]) => name in fields && typeof value === 'string');
  const lines = Array.isArray(nested.lines) ? nested.lines.map(lineWithTyped) : fields.lines;
  const rush = lines === fields.lines ? fields.rush : nested.rush !== undefined;
  return { ...fields, ...Object.fromEntries(text), lines, rush, version: fields.version };
}

function lineWithTyped(typed: unknown): DeskLineFields {
  const line = (typed ?? {}) as Record<string, unknown>;
  const texts = Object.entries(line).filter(([name, value]) => name in BLANK_LINE && typeof value === 'string');
  const [follows, drop] = ['follows', 'drop'].map((name) => line[name] !== undefined) as [boolean, boolean];
  return { ...BLANK_LINE, ...Object.fromEntries(texts), follows, drop };
}
