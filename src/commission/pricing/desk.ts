import { z } from 'zod';
import { currencySchema } from '../money';
import { lineGroupSchema } from './cost-lines';
import {
  amountField,
  decimal,
  emptyIsNone,
  optionalText,
  textLines,
  tick,
  unflatten,
  wholeNumber,
} from '../input-fields';

const AMOUNT = 'Give an amount such as 34.40, or 0.';
const HOURS = 'Give hours as a number such as 3.5, or 0.';
const blankIsZero = (value: unknown) => (typeof value === 'string' && value.trim() === '' ? '0' : value);

/** One cost line as it is typed at the desk: hours and whole units. Kept as minutes and minor units. */
const deskLineSchema = z.object({
  /** Empty for a line that is new. */
  id: z.string().max(60).default(''),
  label: z.string('Name the line.').trim().min(1, 'Name the line.').max(120, 'Shorten the line’s name.'),
  group: lineGroupSchema,
  minutes: z.preprocess(blankIsZero, decimal(HOURS, 0, 1000)).transform((hours) => Math.round(hours * 60)),
  rateMinorPerHour: z.preprocess(blankIsZero, amountField(AMOUNT, 1000)),
  materialsMinor: z.preprocess(blankIsZero, amountField(AMOUNT)),
  zeroReason: optionalText(200, 'Keep the reason under 200 characters.'),
  /** The amount is reckoned from the masses and the metal's prices. */
  follows: tick,
  drop: tick,
});
export type DeskLine = z.output<typeof deskLineSchema>;

/** A blank row at the end of the table, or a row ticked to be left out, is no line; places of the others stay. */
function markBlankLines(input: unknown): unknown {
  const nested = unflatten(input);
  if (typeof nested !== 'object' || nested === null || !('lines' in nested) || !Array.isArray(nested.lines))
    return nested;
  const lines = nested.lines.map((line: unknown) => {
    const { id = '', label = '', drop } = (line ?? {}) as Record<string, unknown>;
    const isBlank = String(id) === '' && String(label).trim() === '';
    return isBlank || tick.parse(drop) ? null : line;
  });
  return { ...nested, lines };
}

/** What the owner edits of a quote, flat enough for a plain form; everything else of the draft stays as it was. */
export const deskSchema = z.preprocess(
  markBlankLines,
  z
    .object({
      /** Version of the draft these figures were typed over; 0 before the first save. */
      version: wholeNumber('Reload the page: the draft’s version was lost on the way.', 0, 1_000_000),
      title: z.string('Name the piece.').trim().min(1, 'Name the piece.').max(160, 'Shorten the piece’s name.'),
      specification: textLines(30, 300, 'At most 30 lines of up to 300 characters.'),
      pieces: wholeNumber('Give a whole number of pieces.', 1, 200),
      finishedMassG: wholeNumber('Give the finished mass in whole grams.', 1, 50_000),
      castMassG: wholeNumber('Give the mass as cast in whole grams.', 1, 50_000),
      pouredMassG: wholeNumber('Give the poured mass in whole grams.', 1, 50_000),
      alloy: z.string('Choose an alloy.').min(1, 'Choose an alloy.').max(20),
      currency: currencySchema,
      tax: z.enum(['standard', 'export'], 'Choose the tax.'),
      rush: tick,
      massTolerance: decimal('Give the tolerance as a percentage such as 5.', 0, 50).transform(
        (percent) => percent / 100,
      ),
      lines: z
        .array(deskLineSchema.nullable())
        .max(81, 'At most 80 cost lines.')
        .transform((lines) => lines.filter((line) => line !== null))
        .refine((lines) => lines.length > 0, 'A quote needs at least one cost line.'),
      margin: decimal('Give the margin as a percentage such as 20.', 0, 80).transform((percent) => percent / 100),
      price: z.enum(['firm', 'p80', 'own'], 'Choose a price.'),
      ownMinor: z.preprocess(emptyIsNone, amountField(AMOUNT).optional()),
      ownReason: optionalText(400, 'Keep the reason under 400 characters.'),
      carriageMinor: amountField(AMOUNT),
      carriageWords: z.string().trim().min(1, 'Say what the carriage is.').max(200),
      validityDays: wholeNumber('Give the validity in whole days.', 1, 365),
      includedRounds: wholeNumber('Give the rounds of change as a whole number.', 0, 20),
      earliestWeeks: wholeNumber('Give weeks as a whole number.', 0, 520),
      latestWeeks: wholeNumber('Give weeks as a whole number.', 0, 520),
      mark: z.string().trim().min(1, 'Say where the mark goes.').max(200),
      outOfRangeReason: optionalText(400, 'Keep the reason under 400 characters.'),
    })
    .superRefine((desk, context) => {
      const need = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message });
      if (desk.price === 'own' && !desk.ownMinor) need('ownMinor', 'Give your own price for the work.');
      if (desk.price === 'own' && !desk.ownReason)
        need('ownReason', 'Say why the price is not the reckoned one; it is kept with the quote.');
      if (desk.latestWeeks < desk.earliestWeeks)
        need('latestWeeks', 'The later week cannot come before the early one.');
    }),
);
export type Desk = z.output<typeof deskSchema>;

/** Sending the draft that was saved as `version` as quote revision `revision` (T7, T8, T10). */
export const sendQuoteSchema = z.object({
  version: wholeNumber('Reload the page: the draft’s version was lost on the way.', 1, 1_000_000),
  revision: wholeNumber('Reload the page: the revision was lost on the way.', 1, 999),
  freeze: tick.refine(Boolean, 'Tick that you have read what will be frozen.'),
});
export type SendQuote = z.output<typeof sendQuoteSchema>;

/** Taking back a quote that is out. */
export const withdrawSchema = z.object({ reason: optionalText(400, 'Keep the reason under 400 characters.') });
export type Withdraw = z.output<typeof withdrawSchema>;
