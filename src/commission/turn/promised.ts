import type { DealState } from '../deal';

/** Whether the days between which a piece leaves the studio still mean something. */
export type PromiseStanding = 'none' | 'ahead' | 'passed';

const PROMISED: ReadonlySet<DealState> = new Set(['booked', 'making', 'finished']);

/**
 * How a promise of days stands today: nothing is promised before booking, while held, or once the piece has left.
 *
 * @param leaves the later day is the promise, as `YYYY-MM-DD`
 * @param today in the same form
 */
export function promiseStanding(deal: DealState, leaves: { to: string } | null, today: string): PromiseStanding {
  if (!leaves || !PROMISED.has(deal)) return 'none';
  return leaves.to < today ? 'passed' : 'ahead';
}
