import { z } from 'zod';
import { tick } from '../input-fields';
import { PIECE_STAGES, SCRAP_CAUSES, type ScrapCause } from './making';

const clientId = z
  .string()
  .regex(/^[0-9A-Za-z-]{8,64}$/, 'The entry has no id of its own. Reload the page and try again.');
const optionalInt = (least: number, most: number, sentence: string) =>
  z.preprocess(
    (value) => (value === '' || value === null ? undefined : value),
    z.coerce.number(sentence).int(sentence).min(least, sentence).max(most, sentence).optional(),
  );
const MASS = 'A mass is a whole number of grams, from 1 to 50,000.';

/** One stage reached by one piece. Masses g, lengths mm. `from` is the stage the page showed, to catch a stale page. */
export const stageDoneSchema = z.object({
  clientId,
  piece: z.coerce.number().int().min(1, 'Say which piece.'),
  from: z.enum(PIECE_STAGES),
  to: z.enum(PIECE_STAGES),
  mouldNo: z.string().trim().max(40).optional(),
  heatNo: z.string().trim().max(40).optional(),
  massG: optionalInt(1, 50_000, MASS),
  balanceMm: optionalInt(0, 2_000, 'The balance point is a whole number of millimetres, from 0 to 2,000.'),
  edge: z.string().trim().max(120).optional(),
  note: z.string().trim().max(500).optional(),
});
export type StageDone = z.output<typeof stageDoneSchema>;

const causes = Object.keys(SCRAP_CAUSES) as [ScrapCause, ...ScrapCause[]];

/** A casting given up, with its cause. `photo` is the id of a photo that shows it. */
export const scrapSchema = z.object({
  clientId,
  piece: z.coerce.number().int().min(1, 'Say which piece.'),
  from: z.enum(PIECE_STAGES),
  cause: z.enum(causes, 'Pick what went wrong; a casting is never scrapped without a cause.'),
  note: z.string().trim().max(500).optional(),
  photo: z.preprocess((value) => (value === '' ? undefined : value), z.uuid().optional()),
});
export type Scrap = z.output<typeof scrapSchema>;

/** Minutes worked on one commission. */
export const minutesSchema = z.object({
  clientId,
  piece: z.coerce.number().int().min(1).optional(),
  operation: z.string().trim().min(1).max(60),
  minutes: z.coerce
    .number('Minutes are a whole number from 1 to 720.')
    .int('Minutes are a whole number from 1 to 720.')
    .min(1, 'Minutes are a whole number from 1 to 720.')
    .max(720, 'More than 12 hours at once is surely a forgotten timer. Enter the hours you worked.'),
});
export type MinutesDone = z.output<typeof minutesSchema>;

/** Start or stop the timer. */
export const timerSchema = z.object({ action: z.enum(['start', 'stop']), operation: z.string().trim().min(1).max(60) });

/** T32: who carries the parcel and how it is followed. */
export const dispatchSchema = z.object({
  carrier: z.string().trim().min(2, 'Name the carrier.').max(80),
  tracking: z.string().trim().min(3, 'Give the tracking number.').max(80),
  adultSignature: tick,
  parcel: z.string().trim().min(3, 'Say what the parcel looks like, without saying what is in it.').max(200),
  duties: z.string().trim().max(500).optional(),
});
export type Dispatch = z.output<typeof dispatchSchema>;
