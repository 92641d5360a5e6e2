import { TZDate } from '@date-fns/tz';
import { addDays, set } from 'date-fns';
import type { LetterId } from './letter-ids';

/** Sign-in and receipts: answers to what the reader did a moment ago, sent at any hour. */
const AT_ANY_HOUR: readonly LetterId[] = ['M0', 'M1', 'M11', 'M12'];

/**
 * The instant until which a letter waits because it is night at the studio, or null to send it now.
 *
 * @param quiet local times "HH:MM"; a span over midnight has its `from` later than its `to`
 * @param timeZone IANA name of the studio's zone; summer time is followed
 */
export function quietUntil(
  letter: LetterId,
  now: Date,
  quiet: { from: string; to: string } | null,
  timeZone: string,
): Date | null {
  if (!quiet || AT_ANY_HOUR.includes(letter)) return null;
  const local = new TZDate(now, timeZone);
  const minute = local.getHours() * 60 + local.getMinutes();
  const from = minuteOfDay(quiet.from);
  const to = minuteOfDay(quiet.to);
  const overMidnight = from > to;
  const isQuiet = overMidnight ? minute >= from || minute < to : minute >= from && minute < to;
  if (!isQuiet) return null;
  const day = overMidnight && minute >= from ? addDays(local, 1) : local;
  const wake = set(day, { hours: Math.floor(to / 60), minutes: to % 60, seconds: 0, milliseconds: 0 });
  return new Date(wake.getTime());
}

function minuteOfDay(time: string): number {
  const [hours = 0, minutes = 0] = time.split(':').map(Number);
  return hours * 60 + minutes;
}
