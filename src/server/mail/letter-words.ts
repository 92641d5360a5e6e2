import { TZDate } from '@date-fns/tz';
import { format } from 'date-fns';
import { formatMoney } from '../../commission/money';
import type { Money } from './letter-data';

const MONTHS = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
];

/** A day "2027-01-12" as readers write it: "12 January 2027". */
export function dayInWords(day: string): string {
  const [year = '', month = '', date = ''] = day.split('-');
  return `${Number(date)} ${MONTHS[Number(month) - 1]} ${year}`;
}

/** Two days as a range: "12 January to 9 February 2027", the year once when it is the same. */
export function spanInWords({ from, to }: { from: string; to: string }): string {
  const first = dayInWords(from);
  const second = dayInWords(to);
  return from.slice(0, 4) === to.slice(0, 4) ? `${first.slice(0, -5)} to ${second}` : `${first} to ${second}`;
}

/** The day of an instant at the studio, "2027-01-12". */
export function localDay(instant: Date, timeZone: string): string {
  return format(new TZDate(instant, timeZone), 'yyyy-MM-dd');
}

/** An instant at the studio: "12 January 2027, 16:05". */
export function momentInWords(instant: string, timeZone: string): string {
  const local = new TZDate(new Date(instant), timeZone);
  return `${dayInWords(format(local, 'yyyy-MM-dd'))}, ${format(local, 'HH:mm')}`;
}

/** Money with its sign and both decimals. */
export function moneyInWords({ minor, currency }: Money): string {
  return formatMoney(minor, currency);
}

/** A mass in g, from a kilogram on in kg: "720 g", "1.25 kg". */
export function massInWords(grams: number): string {
  return grams < 1000 ? `${grams} g` : `${Number((grams / 1000).toFixed(2))} kg`;
}

/** "Wren and Tobias", "a, b and c". */
export function listInWords(items: readonly string[]): string {
  if (items.length < 2) return items.join('');
  return `${items.slice(0, -1).join(', ')} and ${items.at(-1)}`;
}
