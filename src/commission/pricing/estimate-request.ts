import { z } from 'zod';
import { pricedFormSchema } from './form';
import { tick } from '../input-fields';
import { currencySchema } from '../money';
import { estimateRatesSchema } from './rates';

/** A number as a form sends it: text with a point or comma, or a number; empty is not given. */
function numberField<Schema extends z.ZodType>(schema: Schema) {
  return z.preprocess((value) => {
    if (value === null || value === undefined) return undefined;
    if (typeof value !== 'string') return value;
    const text = value.trim().replace(',', '.');
    return text === '' ? undefined : Number(text);
  }, schema);
}

function millimetres(least: number, most: number, what: string) {
  const sentence = `${what} must be a number from ${least} to ${most} mm.`;
  return numberField(z.number(sentence).min(least, sentence).max(most, sentence).optional());
}

const emptyIsNone = (value: unknown) => (value === '' || value === null ? undefined : value);
const optionalCode = z.preprocess(emptyIsNone, z.string().max(60).optional());

const PIECES = 'The number of pieces is a whole number from 1 to 24. Ask us in words about larger editions.';
const HOURS = 'Finishing hours must be a number from 0 to 400, or empty for our usual ones.';
const MASS = 'The finished mass must be from 5 to 8,000 g. Heavier pieces are beyond our largest crucible.';
const VOLUME = 'The volume must be from 500 to 1,000,000 mm3. Is the file perhaps in inches or metres?';

/**
 * What somebody wants a price for, flat so that a plain HTML form can post it. `what` tells a catalogue form from a piece
 * of the buyer's own. Lengths mm, mass g, volume mm3, hours h. Codes of alloys, finishes and edges are the rate card's.
 */
export const estimateRequestSchema = z
  .object({
    what: z.preprocess(emptyIsNone, z.enum(['form', 'own']).default('form')),
    form: optionalCode,
    description: z.preprocess(
      emptyIsNone,
      z.string().trim().max(500, 'Keep the description under 500 characters.').optional(),
    ),
    massG: numberField(z.number(MASS).min(5, MASS).max(8000, MASS).optional()),
    volumeMm3: numberField(z.number(VOLUME).min(500, VOLUME).max(1_000_000, VOLUME).optional()),
    longestMm: millimetres(10, 1000, 'The longest dimension'),
    thinnestMm: millimetres(0.5, 200, 'The thinnest section'),
    cored: tick,
    bladed: tick,
    texture: z.preprocess(emptyIsNone, z.enum(['plain', 'worked', 'ornate']).default('plain')),
    alloy: optionalCode,
    lengthMm: millimetres(10, 1000, 'The length'),
    widthMm: millimetres(3, 400, 'The width'),
    thicknessMm: millimetres(1, 200, 'The thickness'),
    finish: optionalCode,
    finishHours: numberField(z.number(HOURS).min(0, HOURS).max(400, HOURS).optional()),
    edge: optionalCode,
    haft: optionalCode,
    pieces: numberField(z.number(PIECES).int(PIECES).min(1, PIECES).max(24, PIECES).default(1)),
    rush: tick,
    destination: z
      .string()
      .trim()
      .toUpperCase()
      .regex(/^[A-Z]{2}$/, 'Choose the country the piece goes to.')
      .default('GB'),
    currency: z.preprocess(emptyIsNone, currencySchema.default('GBP')),
    buyer: z.preprocess(emptyIsNone, z.enum(['consumer', 'institution']).default('consumer')),
  })
  .superRefine((request, context) => {
    const need = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message });
    if (request.what === 'form') {
      if (!request.form) need('form', 'Choose one of the forms, or say that it is a piece of your own.');
      return;
    }
    if (request.massG === undefined && request.volumeMm3 === undefined)
      need('massG', 'Give the finished mass in grams, or a closed 3D file that we can measure.');
    if (request.longestMm === undefined) need('longestMm', 'Give the longest dimension in millimetres.');
    if (request.thinnestMm === undefined)
      need('thinnestMm', 'Give the thinnest section in millimetres; a guess will do.');
  });
export type EstimateRequest = z.output<typeof estimateRequestSchema>;
export type EstimateRequestInput = z.input<typeof estimateRequestSchema>;

/** What the estimate is reckoned from: the studio's rates and the priced part of its forms. Served as JSON to the page. */
export const rateCardSchema = z.object({ rates: estimateRatesSchema, forms: z.array(pricedFormSchema) });
export type RateCard = z.infer<typeof rateCardSchema>;
