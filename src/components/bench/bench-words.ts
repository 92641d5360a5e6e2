import type { BenchCommission } from '../../server/making/bench-view';

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
