const DAY = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'long', timeZone: 'Europe/London' });
const DAY_AND_YEAR = new Intl.DateTimeFormat('en-GB', {
  day: 'numeric',
  month: 'long',
  year: 'numeric',
  timeZone: 'Europe/London',
});
const MOMENT = new Intl.DateTimeFormat('en-GB', {
  day: 'numeric',
  month: 'long',
  hour: '2-digit',
  minute: '2-digit',
  timeZone: 'Europe/London',
});

/** An instant's day at the studio: "3 March". */
export const dayAt = (instant: Date): string => DAY.format(instant);

/** The same with its year: "3 March 2027". */
export const dayAndYearAt = (instant: Date): string => DAY_AND_YEAR.format(instant);

/** An instant's day and time at the studio: "3 March at 09:12". */
export const momentAt = (instant: Date): string => MOMENT.format(instant);

/** "today", "1 day", "4 days": how long somebody has been waited for. */
export const waited = (days: number): string => (days === 0 ? 'today' : days === 1 ? '1 day' : `${days} days`);
