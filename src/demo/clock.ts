const DAY_MS = 24 * 60 * 60_000;

/** An instant of the demo's past, told from today. */
export type Moment = (now: Date) => Date;

function onDay(from: Date, days: number, time: string): Date {
  const day = new Date(from.getTime() + days * DAY_MS);
  return new Date(`${day.toISOString().slice(0, 10)}T${time}:00Z`);
}

/** A time of day (UTC) so many days ago: `ago(40, '10:15')`. */
export function ago(days: number, time: string): Moment {
  return (now) => onDay(now, -days, time);
}

/** Exactly so many days and minutes before the seed, whatever the time of day: where a count of days must come out. */
export function exactly(days: number, minutes: number): Moment {
  return (now) => new Date(now.getTime() - days * DAY_MS - minutes * 60_000);
}

/**
 * A pour day, the studio's every second Thursday, counted back from today, and so many days after it: `pourDay(2, 1,
 * '09:00')` is the morning after the last but one. The newest lies 3 to 16 days back, each older one two weeks further.
 */
export function pourDay(back: number, plus: number, time: string): Moment {
  return (now) => {
    const fortnight = 14;
    const firstThursday = Date.UTC(2026, 0, 1);
    const latest = Math.floor((now.getTime() - 3 * DAY_MS - firstThursday) / (fortnight * DAY_MS));
    const day = new Date(firstThursday + (latest - (back - 1)) * fortnight * DAY_MS);
    return onDay(day, plus, time);
  };
}
