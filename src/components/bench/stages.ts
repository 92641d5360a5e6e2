import { STAGE_ACTS, type PieceStage } from '../../commission/making/making';
import type { BenchPiece } from '../../server/making/bench-view';
import type { RunnerStage } from '../ui/Runner';

const SHORT: Partial<Record<PieceStage, string>> = {
  pattern: 'Pattern',
  mould: 'Mould',
  poured: 'Pour',
  sound: 'Sound',
  fettled: 'Fettle',
  hardened: 'Harden',
  finished: 'Finish',
  patinated: 'Patina',
  hafted: 'Haft',
  inspected: 'Inspect',
  packed: 'Pack',
};

/** The four stages around where a piece stands, as the narrow runner shows them. */
export function stagesAround(piece: BenchPiece): RunnerStage[] {
  const at = piece.stage === 'waiting' ? -1 : piece.route.indexOf(piece.stage);
  const first = Math.max(0, Math.min(at - 1, piece.route.length - 4));
  return piece.route.slice(first, first + 4).map((stage) => {
    const place = piece.route.indexOf(stage);
    const state = place <= at ? 'done' : place === at + 1 ? 'hot' : 'ahead';
    return { name: SHORT[stage] ?? STAGE_ACTS[stage], state, share: 0.5 };
  });
}

/** What a piece has reached, in two words at most, as its own button shows it. */
export function stageName(stage: PieceStage): string {
  return stage === 'waiting' ? 'Not begun' : STAGE_ACTS[stage].replace(' ready', '').replace('Edges ', '');
}
