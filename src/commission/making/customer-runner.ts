import type { DealState } from '../deal';
import type { PieceStage } from './making';

/** A stage of the customer's runner. `share` 0 to 1 is how far a hot stage has come. */
export interface RunnerStep {
  name: string;
  note?: string;
  state: 'done' | 'hot' | 'ahead' | 'skipped';
  share?: number;
}

/** What the runner is drawn from. `reachedOn` gives the day (YYYY-MM-DD) a stage was last reached. */
export interface RunnerFacts {
  deal: DealState;
  pieces: readonly { route: readonly PieceStage[]; stage: PieceStage }[];
  reachedOn: Partial<Record<PieceStage | 'sent' | 'approved', string>>;
  /** Attempts broken out so far, and how many of them were scrapped. */
  scrapped: number;
  /** The pattern waits for the customer's look, or for a new one after changes were asked. */
  gateA: 'none' | 'open' | 'approved' | 'changes';
  dayWords: (day: string) => string;
}

const GATES: { name: string; stages: PieceStage[] }[] = [
  { name: 'Pattern', stages: ['pattern'] },
  { name: 'Mould', stages: ['mould'] },
  { name: 'Pour', stages: ['poured', 'sound'] },
  { name: 'Finishing', stages: ['fettled', 'hardened', 'finished', 'patinated', 'hafted'] },
  { name: 'Inspection', stages: ['inspected'] },
];

const NOT_STARTED: ReadonlySet<DealState> = new Set([
  'enquiry',
  'asking',
  'estimated',
  'quoted',
  'agreed',
  'declined',
  'lapsed',
]);
const GONE: ReadonlySet<DealState> = new Set(['sent', 'delivered', 'closed', 'issue', 'lost']);

/**
 * The runner of a commission: a gate counts as passed when every piece has passed it, so several
 * pieces are shown at the least advanced one, with how many are beyond.
 */
export function runnerOf(facts: RunnerFacts): RunnerStep[] {
  if (NOT_STARTED.has(facts.deal) || facts.pieces.length === 0) {
    return [...GATES.map(({ name }) => ({ name, state: 'ahead' as const })), { name: 'Dispatch', state: 'ahead' }];
  }
  const steps = GATES.map((gate) => stepOf(gate, facts));
  const dispatch: RunnerStep = GONE.has(facts.deal)
    ? { name: 'Dispatch', state: 'done', ...noted(facts, facts.reachedOn.sent, 'Sent') }
    : { name: 'Dispatch', state: 'ahead' };
  return warmFirst([...steps, dispatch], facts);
}

function stepOf(gate: { name: string; stages: PieceStage[] }, facts: RunnerFacts): RunnerStep {
  const concerned = facts.pieces.filter((piece) => gate.stages.some((stage) => piece.route.includes(stage)));
  if (concerned.length === 0) return { name: gate.name, state: 'skipped' };
  const shares = concerned.map((piece) => shareOf(piece, gate.stages));
  const through = shares.filter((share) => share === 1).length;
  const share = shares.reduce((sum, each) => sum + each, 0) / shares.length;
  if (gate.name === 'Pattern' && facts.gateA === 'open')
    return { name: gate.name, state: 'ahead', share: 0.9, note: 'Waiting for your look' };
  if (through === concerned.length) {
    const last = [...gate.stages].reverse().find((stage) => facts.reachedOn[stage]);
    const reached = last ? facts.reachedOn[last] : undefined;
    const day = gate.name === 'Pattern' ? (facts.reachedOn.approved ?? reached) : reached;
    return { name: gate.name, state: 'done', ...noted(facts, day, wordsFor(gate.name, facts)) };
  }
  const count = concerned.length > 1 ? `${through} of ${concerned.length}` : undefined;
  return { name: gate.name, state: 'ahead', share, ...(count && share > 0 ? { note: count } : {}) };
}

function shareOf(piece: { route: readonly PieceStage[]; stage: PieceStage }, stages: readonly PieceStage[]): number {
  const own = stages.filter((stage) => piece.route.includes(stage));
  const at = piece.stage === 'waiting' ? -1 : piece.route.indexOf(piece.stage);
  const reached = own.filter((stage) => piece.route.indexOf(stage) <= at).length;
  return own.length === 0 ? 1 : reached / own.length;
}

function wordsFor(gate: string, facts: RunnerFacts): string {
  if (gate === 'Pattern' && facts.reachedOn.approved) return 'You approved it';
  if (gate === 'Pour')
    return facts.scrapped > 0 ? `Sound, after ${facts.scrapped} re-pour${facts.scrapped > 1 ? 's' : ''}` : 'Sound';
  if (gate === 'Mould') return 'Made';
  return 'Done';
}

function noted(facts: RunnerFacts, day: string | undefined, words: string): { note?: string } {
  return { note: day ? `${words} ${facts.dayWords(day)}` : words };
}

/** The first gate not yet passed is the hot one; after a failed pour it says that it is passed again. */
function warmFirst(steps: RunnerStep[], facts: RunnerFacts): RunnerStep[] {
  const hot = steps.findIndex((step) => step.state === 'ahead');
  return steps.map((step, index) => {
    if (index !== hot) return step;
    const again =
      facts.scrapped > 0 && (step.name === 'Mould' || step.name === 'Pour') ? 'Again, at no charge' : undefined;
    const note = step.note ?? again;
    return { ...step, state: 'hot', share: Math.max(0.15, step.share ?? 0), ...(note ? { note } : {}) };
  });
}
