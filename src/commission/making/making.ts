/**
 * Stages of one piece, in order. `waiting` is before any work; `pattern` covers pattern, wax and
 * gate A; an attempt runs from `mould` to `sound`. Stages a quote leaves out are not in its route.
 */
export const PIECE_STAGES = [
  'waiting',
  'pattern',
  'mould',
  'poured',
  'sound',
  'fettled',
  'hardened',
  'finished',
  'patinated',
  'hafted',
  'inspected',
  'packed',
] as const;
export type PieceStage = (typeof PIECE_STAGES)[number];

/** What finishing a piece needs beyond casting it; decides its route. */
export interface RouteOptions {
  pattern: boolean;
  harden: boolean;
  patinate: boolean;
  haft: boolean;
}

/** The stages a piece goes through, in order, without `waiting`. */
export function routeFor(options: RouteOptions): PieceStage[] {
  return PIECE_STAGES.filter((stage) => {
    if (stage === 'waiting') return false;
    if (stage === 'pattern') return options.pattern;
    if (stage === 'hardened') return options.harden;
    if (stage === 'patinated') return options.patinate;
    if (stage === 'hafted') return options.haft;
    return true;
  });
}

/** The stage after `stage` on this route, or null at its end. */
export function nextStage(route: readonly PieceStage[], stage: PieceStage): PieceStage | null {
  if (stage === 'waiting') return route[0] ?? null;
  const place = route.indexOf(stage);
  return place < 0 ? null : (route[place + 1] ?? null);
}

/** Where a piece stands after its casting was scrapped: back to the stage before the mould. */
export function stageAfterScrap(route: readonly PieceStage[]): PieceStage {
  return route.includes('pattern') ? 'pattern' : 'waiting';
}

/** Whether `stage` lies at or behind `at` on this route. */
export function hasReached(route: readonly PieceStage[], at: PieceStage, stage: PieceStage): boolean {
  return stage === 'waiting' || (route.includes(stage) && route.indexOf(at) >= route.indexOf(stage));
}

/** The least advanced of several pieces: what the customer is shown, with how many have passed it. */
export function leastAdvanced(stages: readonly PieceStage[]): { stage: PieceStage; beyond: number } {
  const order = stages.map((stage) => PIECE_STAGES.indexOf(stage));
  const least = order.length === 0 ? 0 : Math.min(...order);
  return { stage: PIECE_STAGES[least] ?? 'waiting', beyond: order.filter((place) => place > least).length };
}

/** The act that reaches a stage, as a maker's button says it. */
export const STAGE_ACTS: Record<PieceStage, string> = {
  waiting: 'Start',
  pattern: 'Pattern ready',
  mould: 'Mould ready',
  poured: 'Poured',
  sound: 'Sound',
  fettled: 'Fettled',
  hardened: 'Edges hardened',
  finished: 'Finished',
  patinated: 'Patinated',
  hafted: 'Hafted',
  inspected: 'Inspected',
  packed: 'Packed',
};

/** The operation whose minutes are logged while working towards a stage. */
export const STAGE_OPERATIONS: Record<PieceStage, string> = {
  waiting: 'Getting ready',
  pattern: 'Pattern and wax',
  mould: 'Moulding',
  poured: 'Melting and pouring',
  sound: 'Breaking out',
  fettled: 'Fettling',
  hardened: 'Edge hardening',
  finished: 'Filing and finishing',
  patinated: 'Patina',
  hafted: 'Hafting',
  inspected: 'Inspection',
  packed: 'Packing',
};

/** Why a casting is scrapped, with a sentence for a reader who has never seen a foundry. Common practice, no source. */
export const SCRAP_CAUSES = {
  misrun: { name: 'Misrun', plain: 'The metal froze before it reached the end of the mould.' },
  'cold-shut': { name: 'Cold shut', plain: 'Two streams of metal met too cool to join, which leaves a seam.' },
  porosity: { name: 'Porosity', plain: 'Gas in the metal left small holes inside the casting.' },
  shrinkage: { name: 'Shrinkage', plain: 'A thick part froze last and drew a hollow into itself.' },
  blow: { name: 'Blow', plain: 'Steam or gas from the mould blew a cavity into the casting.' },
  'core-shift': { name: 'Core shift', plain: 'The core that forms the hollow moved, so one wall came out thin.' },
  cracked: { name: 'Cracked', plain: 'The casting tore as it cooled and shrank.' },
  inclusion: {
    name: 'Sand or dross in the metal',
    plain: 'A bit of the mould or of the metal’s skin was carried into the casting.',
  },
  runout: { name: 'Run-out', plain: 'Metal found a way out of the mould before it froze.' },
} as const;
export type ScrapCause = keyof typeof SCRAP_CAUSES;
