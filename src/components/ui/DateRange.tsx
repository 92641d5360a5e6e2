import { dateRangeWords, type Day } from './date-words';

export interface DateRangeProps {
  from: Day;
  to: Day;
  withYear?: boolean;
}

/** A range of days in words, never broken over two lines inside "9 to 20". */
export function DateRange({ from, to, withYear = false }: DateRangeProps) {
  return <time dateTime={`${from}/${to}`}>{dateRangeWords(from, to, withYear)}</time>;
}
