import { z } from 'zod';
import { Refusal, badParam } from './errors';
import type { FormTree, FormValue } from './form';

/** A whole number written as text. */
export const whole = z
  .string()
  .regex(/^-?\d{1,15}$/)
  .transform(Number);

/** "true" or "false". */
export const yesNo = z.enum(['true', 'false']).transform((text) => text === 'true');

/** Up to 50 pairs, names to 40 characters, values to 500 (Stripe's documented limits); an empty text clears all. */
export const metadata = z
  .union([
    z.literal('').transform(() => ({})),
    z
      .record(
        z.string().max(40, 'Metadata keys can be up to 40 characters long.'),
        z.string().max(500, 'Metadata values can be up to 500 characters long.'),
      )
      .refine((pairs) => Object.keys(pairs).length <= 50, 'You can have up to 50 metadata keys.'),
  ])
  .optional();

/** Text that an empty value clears. */
export const clearable = z
  .string()
  .max(5000)
  .transform((text) => (text === '' ? null : text))
  .optional();

const currencies = new Set(Intl.supportedValuesOf('currency').map((code) => code.toLowerCase()));

/** A three-letter code of ISO 4217, small letters. */
export const currency = z
  .string()
  .transform((code) => code.toLowerCase())
  .refine((code) => currencies.has(code), 'Invalid currency. Use a three-letter code of ISO 4217 in small letters.');

const bound = whole.optional();

/** An instant in Unix seconds, or a range of them. */
export const range = z.union([whole, z.strictObject({ gt: bound, gte: bound, lt: bound, lte: bound })]).optional();

/** Which part of a list is wanted. */
export const paging = {
  limit: whole.refine((count) => count >= 1 && count <= 100, 'The limit must be from 1 to 100.').optional(),
  starting_after: z.string().optional(),
  ending_before: z.string().optional(),
};

/**
 * Reads parameters by a schema.
 * @throws Refusal in Stripe's shape, naming the first parameter that is missing, unknown or wrong.
 */
export function readParams<Schema extends z.ZodType>(schema: Schema, input: FormTree): z.output<Schema> {
  const parsed = schema.safeParse(input);
  if (parsed.success) return parsed.data;
  throw refuse(parsed.error.issues[0], input);
}

function refuse(issue: z.core.$ZodIssue | undefined, input: FormTree): Refusal {
  if (!issue) return new Refusal(400, 'The parameters cannot be read.');
  if (issue.code === 'unrecognized_keys') {
    const param = bracketed([...issue.path, issue.keys[0] ?? '']);
    return badParam(param, `Received unknown parameter: ${param}`, 'parameter_unknown');
  }
  const param = bracketed(issue.path);
  const given = at(input, issue.path);
  if (given === undefined) return badParam(param, `Missing required param: ${param}.`, 'parameter_missing');
  if (issue.code === 'invalid_format' && issue.format === 'regex') {
    return badParam(param, `Invalid integer: ${String(given)}`, 'parameter_invalid_integer');
  }
  if (given === '') return badParam(param, `You passed an empty string for '${param}'.`, 'parameter_invalid_empty');
  return badParam(param, `Invalid ${param}: ${issue.message}`);
}

function bracketed(path: PropertyKey[]): string {
  return path.map((step, index) => (index === 0 ? String(step) : `[${String(step)}]`)).join('');
}

function at(tree: FormValue | undefined, path: PropertyKey[]): FormValue | undefined {
  let here = tree;
  for (const step of path) {
    if (here === undefined || typeof here === 'string') return undefined;
    here = (here as Record<PropertyKey, FormValue>)[step];
  }
  return here;
}
