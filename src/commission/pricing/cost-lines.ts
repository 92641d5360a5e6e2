import { z } from 'zod';
import { amountMinorSchema, halfUp } from '../money';

/** Where a line enters the model: one-off before or after gate A, once an attempt, once a sound piece, by hand, bought in. */
export const lineGroupSchema = z.enum(['before-gate', 'after-gate', 'attempt', 'metal', 'hand', 'sundries']);

/**
 * One cost line. Its cost per unit is minutes x hourly rate, half-up to the minor unit, plus materials; the unit is the
 * commission, or a piece. Attempt and metal lines always count per piece poured, hand lines per piece.
 */
export const costLineSchema = z.object({
  id: z.string().min(1).max(60),
  label: z.string().min(1, 'Give the line a name.').max(120),
  group: lineGroupSchema,
  minutes: z.number().int('Whole minutes, please.').min(0, 'Minutes cannot be less than zero.').max(60_000),
  rateMinorPerHour: amountMinorSchema,
  materialsMinor: amountMinorSchema,
  /** What the amount was reckoned from, for the reader: "1,600 g of an 8,400 g heat". */
  driver: z.string().max(200),
  per: z.enum(['commission', 'piece']),
  /** How many pieces a per-piece line applies to; null is every piece. */
  onPieces: z.number().int().min(0).max(200).nullable(),
  /** Later pieces take the repeat factor on their minutes. */
  takesRepeatFactor: z.boolean(),
  /** Fettling: a share of it is lost when a fault opens under the file. */
  lostWhenLate: z.boolean(),
  /** Why a line costs nothing; needed before a quote is sent. */
  zeroReason: z.string().max(200).nullable(),
});
export type CostLine = z.infer<typeof costLineSchema>;

/** Cost of `minutes` at an hourly rate, in minor units, half-up. */
export function timeCostMinor(minutes: number, rateMinorPerHour: number): number {
  return halfUp((minutes * rateMinorPerHour) / 60);
}

/** What one unit of the line costs, in minor units. */
export function unitCostMinor(line: Pick<CostLine, 'minutes' | 'rateMinorPerHour' | 'materialsMinor'>): number {
  return timeCostMinor(line.minutes, line.rateMinorPerHour) + line.materialsMinor;
}

/** How many units of the line a commission of `pieces` takes, before any re-pour. */
export function lineUnits(line: Pick<CostLine, 'per' | 'onPieces'>, pieces: number): number {
  if (line.per === 'commission') return 1;
  return line.onPieces === null ? pieces : Math.min(line.onPieces, pieces);
}

/** What a failed pour does to the line, in the words the quote desk shows. */
export function atRepour(line: CostLine): 'no' | 'again' | 'partly' {
  if (line.group === 'attempt') return 'again';
  return line.lostWhenLate ? 'partly' : 'no';
}

/** A line with everything unusual left out: bench time, once a commission, no factor. Tests, seeds and forms build on it. */
export function costLine(line: Pick<CostLine, 'id' | 'label' | 'group'> & Partial<CostLine>): CostLine {
  const perPiece = line.group === 'attempt' || line.group === 'metal' || line.group === 'hand';
  return {
    minutes: 0,
    rateMinorPerHour: 0,
    materialsMinor: 0,
    driver: '',
    per: perPiece ? 'piece' : 'commission',
    onPieces: null,
    takesRepeatFactor: false,
    lostWhenLate: false,
    zeroReason: null,
    ...line,
  };
}
