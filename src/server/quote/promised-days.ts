import { DEPOSIT_LAPSES_AFTER_DAYS } from '../../commission/clock';
import type { WeekRange } from '../../commission/pricing/quote-draft';

const DAY_MS = 24 * 60 * 60_000;

/** The day `days` after `from`, as YYYY-MM-DD in UTC. */
export function dayAfter(from: Date, days: number): string {
  return new Date(from.getTime() + days * DAY_MS).toISOString().slice(0, 10);
}

/** The days between which a piece leaves when the weeks are counted from `from`. */
export function leavesBetween(from: Date, weeks: WeekRange): { from: string; to: string } {
  return { from: dayAfter(from, weeks.earliestWeeks * 7), to: dayAfter(from, weeks.latestWeeks * 7) };
}

/** The second working day after `from`, weekends left out: when the studio answers by. */
export function answerDay(from: Date): string {
  let day = from;
  for (let left = 2; left > 0;) {
    day = new Date(day.getTime() + DAY_MS);
    if (day.getUTCDay() !== 0 && day.getUTCDay() !== 6) left -= 1;
  }
  return dayAfter(day, 0);
}

/** The first stage can be paid at once; it is late when the agreement would lapse, or when agreed credit ends. */
export function firstDue(buyer: { netDays?: number } | null, acceptedAt: Date): Date {
  return new Date(acceptedAt.getTime() + (buyer?.netDays || DEPOSIT_LAPSES_AFTER_DAYS) * DAY_MS);
}
