import { nearestRank } from './calibration';
import type { WeekRange } from './quote-draft';
import type { Throughput } from './rates';

/**
 * Weeks from deposit, from the hours the studio really finished: the early end at a typical week's pace (P50), the outer
 * end at a slow week's (P10), fixed waits in both, and one re-pour cycle in the outer end when a failed pour is likely
 * enough. The outer end is the promise.
 */
export function dateRange(throughput: Throughput, ownHours: number, chanceOfRepour: number): WeekRange {
  const hours = throughput.queuedHours + ownHours;
  const weeksAt = (q: number) => Math.ceil(hours / Math.max(1, nearestRank(throughput.finishedHoursByWeek, q)) - 1e-9);
  const repour = chanceOfRepour > throughput.repourAboveChance ? throughput.repourWeeks : 0;
  return {
    earliestWeeks: weeksAt(0.5) + throughput.fixedWaitWeeks,
    latestWeeks: weeksAt(0.1) + throughput.fixedWaitWeeks + repour,
  };
}
