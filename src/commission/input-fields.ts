import { z } from 'zod';

/** Empty text, as an untouched field of a plain form sends it, counts as not given. */
export const emptyIsNone = (value: unknown): unknown =>
  value === null || (typeof value === 'string' && value.trim() === '') ? undefined : value;

/** A tick box: 'on', 'yes', 'true', '1' or true is ticked; everything else, an absent field too, is not. */
export const tick = z
  .preprocess((value) => [true, 'on', 'yes', 'true', '1'].includes(value as string | boolean), z.boolean())
  .default(false);

/** Text that may be left empty. */
export const optionalText = (most: number, message: string) =>
  z.preprocess(emptyIsNone, z.string().trim().max(most, message).optional());

/** A decimal number typed with a point or a comma; commas and spaces between thousands are left out. */
export function decimal(message: string, least: number, most: number) {
  return z.preprocess(
    (value) => (typeof value === 'string' ? readDecimal(value) : value),
    z.number(message).min(least, message).max(most, message),
  );
}

function readDecimal(text: string): number | undefined {
  const bare = text.trim().replace(/[\s\u00a0£€$]/g, '');
  if (bare === '') return undefined;
  const grouped = /^\d{1,3}(,\d{3})+(\.\d+)?$/.test(bare) ? bare.replaceAll(',', '') : bare.replace(',', '.');
  return Number(grouped);
}

/** An amount typed in whole pounds, euros or dollars with at most two decimals, read as minor units. */
export function amountField(message: string, mostMajor = 1_000_000) {
  return decimal(message, 0, mostMajor)
    .refine((major) => Math.abs(major * 100 - Math.round(major * 100)) < 1e-6, message)
    .transform((major) => Math.round(major * 100));
}

/** A whole number typed in a form. */
export function wholeNumber(message: string, least: number, most: number) {
  return decimal(message, least, most).refine(Number.isInteger, message);
}

/** Lines of a text area: trimmed, empty ones left out. A list passes through. */
export function textLines(mostLines: number, mostCharacters: number, message: string) {
  return z.preprocess(
    (value) =>
      (typeof value === 'string' ? value.split(/\r?\n/) : Array.isArray(value) ? value : [])
        .map((line: unknown) => (typeof line === 'string' ? line.trim() : line))
        .filter((line: unknown) => line !== ''),
    z.array(z.string().max(mostCharacters, message)).max(mostLines, message),
  );
}

/** A name with more parts than any field of ours has is left out. */
const MOST_PARTS = 6;

/** Turns `{ 'lines.0.hours': '3' }`, as a plain form sends it, into `{ lines: [{ hours: '3' }] }`; nested input stays. */
export function unflatten(input: unknown): unknown {
  if (typeof input !== 'object' || input === null || Array.isArray(input)) return input;
  const result: Record<string, unknown> = {};
  for (const [name, value] of Object.entries(input)) {
    const parts = name.split('.', MOST_PARTS + 1);
    if (parts.length <= MOST_PARTS) place(result, parts, value);
  }
  return listsOf(result);
}

function place(into: Record<string, unknown>, path: readonly string[], value: unknown): void {
  const [head, ...rest] = path;
  if (head === undefined || head === '__proto__') return;
  if (rest.length === 0) {
    into[head] = value;
    return;
  }
  const known = Object.hasOwn(into, head) ? into[head] : undefined;
  const next = typeof known === 'object' && known !== null ? (known as Record<string, unknown>) : {};
  into[head] = next;
  place(next, rest, value);
}

function listsOf(value: unknown): unknown {
  if (typeof value !== 'object' || value === null || Array.isArray(value)) return value;
  const entries = Object.entries(value).map(([key, item]) => [key, listsOf(item)] as const);
  if (entries.length === 0 || !entries.every(([key]) => /^\d{1,3}$/.test(key))) return Object.fromEntries(entries);
  return entries.sort(([a], [b]) => Number(a) - Number(b)).map(([, item]) => item);
}
