const MONTHS = 'January February March April May June July August September October November December'.split(' ');

/** A calendar day as `YYYY-MM-DD`, in the studio's own zone. */
export type Day = string;

function parts(day: Day): { year: string; month: string; date: number } {
  const [year = '', month = '', date = ''] = day.slice(0, 10).split('-');
  return { year, month: MONTHS[Number(month) - 1] ?? month, date: Number(date) };
}

/** "3 February", or "3 February 2027" with its year. */
export function dayWords(day: Day, withYear = false): string {
  const { year, month, date } = parts(day);
  return withYear ? `${date} ${month} ${year}` : `${date} ${month}`;
}

/**
 * A range of days as it is promised: "9 to 20 March", "28 February to 12 March". The year is said when the range
 * crosses into another, or when asked for.
 */
export function dateRangeWords(from: Day, to: Day, withYear = false): string {
  const [a, b] = [parts(from), parts(to)];
  if (a.year !== b.year) return `${dayWords(from, true)} to ${dayWords(to, true)}`;
  if (from.slice(0, 10) === to.slice(0, 10)) return dayWords(to, withYear);
  const start = a.month === b.month ? String(a.date) : dayWords(from);
  return `${start} to ${dayWords(to, withYear)}`;
}
