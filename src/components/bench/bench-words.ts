import { hasReached, PIECE_STAGES } from '../../commission/making/making';
import { withinSentence } from '../../commission/sentence';
import type { BenchCommission, BenchPiece } from '../../server/making/bench-view';

const DAY = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'long', timeZone: 'UTC' });

/** What stands under a commission's name at the bench: number, how many pieces, what else is told, and until when. */
export function benchFacts(
  bench: Pick<BenchCommission, 'ref' | 'pieces' | 'dueOut'>,
  more: readonly string[] = [],
): string {
  const count = bench.pieces.length;
  return [
    bench.ref,
    count === 1 ? 'one piece' : `${count} pieces`,
    ...more,
    ...(bench.dueOut ? [`due out by ${DAY.format(new Date(bench.dueOut))}`] : []),
  ].join(', ');
}

/** What a maker does next on a commission, or whom it waits for; with how many of several pieces it concerns. */
export function nextInHand({ deal, pieces, gateA }: Pick<BenchCommission, 'deal' | 'pieces' | 'gateA'>): string {
  const place = (piece: BenchPiece) => PIECE_STAGES.indexOf(piece.stage);
  const [least] = pieces.filter((piece) => piece.next !== null).sort((a, b) => place(a) - place(b));
  if (!least) return 'Packed, to be sent';
  const { next, operation } = least;
  if (next === 'packed' && deal !== 'finished') return 'Next: tell the customer that it is finished';
  if (next === 'mould' && least.route.includes('pattern') && gateA === 'open')
    return 'Waits for the customer to approve the pattern';
  const ahead = pieces.filter((piece) => next && !hasReached(piece.route, piece.stage, next)).length;
  return `Next: ${withinSentence(operation)}${pieces.length > 1 ? `, ${ahead} of ${pieces.length} pieces` : ''}`;
}
