import { z } from 'zod';
import { costLineSchema } from './cost-lines';
import { amountMinorSchema, currencySchema } from '../money';
import { handFactorSchema, pricingConstantsSchema } from './rates';

const grams = z.number().int().min(1).max(50_000);
const words = (longest: number) => z.string().trim().max(longest);

/** Prices of the metal as they were when the quote was drafted, minor units per kg. */
export const quoteMetalSchema = z.object({
  code: z.string().min(1),
  name: z.string().min(1),
  ingotMinorPerKg: amountMinorSchema,
  returnsMinorPerKg: amountMinorSchema,
  meltLoss: z.number().min(0).max(0.2),
});
export type QuoteMetal = z.infer<typeof quoteMetalSchema>;

/** Which price is asked: the model's firm price, the safer one, or the owner's own figure with its reason. */
export const priceChoiceSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('firm') }),
  z.object({ kind: z.literal('p80') }),
  z.object({
    kind: z.literal('own'),
    workMinor: amountMinorSchema.min(1, 'A price of your own cannot be zero.'),
    reason: words(400).min(1, 'Say why the price is not the reckoned one; it is kept with the quote.'),
  }),
]);
export type PriceChoice = z.infer<typeof priceChoiceSchema>;

/** Tax on this quote. 'export' is zero-rated and waits for evidence. `shown` is how prices are put to the buyer. */
export const taxTreatmentSchema = z.object({
  kind: z.enum(['standard', 'export']),
  rate: z.number().min(0).max(1),
  shown: z.enum(['inclusive', 'exclusive']),
});
export type TaxTreatment = z.infer<typeof taxTreatmentSchema>;

/** The quoted currency: foreign units for one of the studio's, and the buffer; both frozen. Studio's own: rate 1, buffer 0. */
export const quoteCurrencySchema = z.object({
  studio: currencySchema,
  quoted: currencySchema,
  rate: z.number().positive(),
  buffer: z.number().min(0).max(0.5),
});
export type QuoteCurrency = z.infer<typeof quoteCurrencySchema>;

/** A rushed piece has its heat to itself: the whole heat's cost, and how many heats the first pours take. */
export const rushSchema = z.object({ heatMinor: amountMinorSchema, heats: z.number().int().min(1).max(50) });
export type Rush = z.infer<typeof rushSchema>;

/** Weeks from deposit; the later end is the promise. */
export const weekRangeSchema = z
  .object({ earliestWeeks: z.number().int().min(0).max(520), latestWeeks: z.number().int().min(0).max(520) })
  .refine((range) => range.earliestWeeks <= range.latestWeeks, 'The later end cannot come before the early one.');
export type WeekRange = z.infer<typeof weekRangeSchema>;

/**
 * Everything a quote is priced from, owned by the owner's desk until it is sent and then frozen. All money is in the
 * studio's currency, minor units, without tax.
 */
export const quoteDraftSchema = z.object({
  title: words(160).min(1, 'Name the piece.'),
  /** What the buyer gets, one plain sentence each: alloy, finish, edge, haft. */
  specification: z.array(words(300)).max(30),
  form: z.string().nullable(),
  pieces: z.number().int().min(1, 'At least one piece.').max(200),
  ratesVersion: z.string(),
  metal: quoteMetalSchema,
  massesG: z.object({ finished: grams, cast: grams, poured: grams }),
  massTolerance: z.number().min(0).max(0.5),
  lines: z.array(costLineSchema).min(1).max(80),
  soundness: z.object({
    family: z.string(),
    familyName: z.string(),
    alpha: z.number().gt(1, 'The count of sound pours must be above one, or no expectation exists.'),
    beta: z.number().gt(0),
  }),
  hand: handFactorSchema,
  lateShare: z.number().min(0).max(1),
  /** The model's constants; `pricing.margin` is the margin of this quote. */
  pricing: pricingConstantsSchema,
  rush: rushSchema.nullable(),
  carriage: z.object({ minor: amountMinorSchema, words: words(200) }),
  currency: quoteCurrencySchema,
  tax: taxTreatmentSchema,
  price: priceChoiceSchema,
  /** The range the buyer was shown before, and why this quote lies outside it. */
  shownRange: z.object({ lowMinor: amountMinorSchema, highMinor: amountMinorSchema }).nullable(),
  outOfRangeReason: words(400).nullable(),
  validityDays: z.number().int().min(1).max(365),
  includedRounds: z.number().int().min(0).max(20),
  dateRange: weekRangeSchema,
  termsVersion: words(60),
  mark: words(200),
});
export type QuoteDraft = z.infer<typeof quoteDraftSchema>;
