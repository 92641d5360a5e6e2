import { z } from 'zod';
import { PIECE_STAGES, SCRAP_CAUSES, type ScrapCause } from '../../commission/making/making';
import { currencySchema } from '../../commission/money';
import type { LetterId } from './letter-ids';

/**
 * What each letter must be told. Objects are strict: a value that a letter has no place for (a cost line, a chance of
 * loss, another customer's name) is refused when the mail is queued, not discovered in somebody's inbox.
 * Money is in minor units, masses in g, lengths in mm, instants and days are ISO strings.
 */
const words = z.string().trim().min(1).max(2000);
const line = z.string().trim().min(1).max(300);
const day = z.iso.date();
const instant = z.iso.datetime({ offset: true });
const sha256 = z.string().regex(/^[0-9a-f]{64}$/);

export const moneySchema = z.strictObject({ minor: z.int(), currency: currencySchema });
export type Money = z.infer<typeof moneySchema>;

/** The days between which the piece leaves the studio; the outer day is the promise. */
const leavesSchema = z.strictObject({ from: day, to: day });

const factSchema = z.strictObject({ label: line, value: line });
export type Fact = z.infer<typeof factSchema>;

/** A photo of the work by its id; its small copy travels inside the mail, so nothing is loaded from afar. */
export const pictureSchema = z.strictObject({ photoId: z.uuid(), caption: line, alt: z.string().max(600) });
export type Picture = z.infer<typeof pictureSchema>;

/** `when` tells it in words ("on acceptance", "when you approve the wax", "before it is sent"). */
const stagePaymentSchema = z.strictObject({ label: line, when: line, amount: moneySchema });
export type StagePaymentLine = z.infer<typeof stagePaymentSchema>;

/** Which commission, and the reader's name as they gave it. */
const about = { ref: z.string().regex(/^[A-Z]{1,4}-\d{3,6}$/), title: line, name: line };

const quoteBody = {
  ...about,
  revision: z.int().min(1),
  /** Everything, carriage and tax included. */
  total: moneySchema,
  /** The tax inside `total`; absent when none is charged. */
  tax: moneySchema.optional(),
  /** Why no tax is charged, when it is not ("Export outside the United Kingdom"). */
  taxNote: line.optional(),
  stages: z.array(stagePaymentSchema).min(1).max(6),
  /** What the price covers, in the customer's words; never cost lines. */
  includes: z.array(line).min(1).max(20),
  roundsOfChange: z.int().min(0).max(20),
  targetMass: z.strictObject({ grams: z.int().positive(), toleranceG: z.int().min(0) }).optional(),
  /** The maker's mark and where it goes. */
  mark: line,
  leaves: leavesSchema,
  validUntil: instant,
  termsVersion: line,
};

const gateSchema = z.enum(['A', 'B', 'C']);
const causes = Object.keys(SCRAP_CAUSES) as [ScrapCause, ...ScrapCause[]];

/** Schema of each letter's data, by its number in the mail catalogue. */
export const LETTER_DATA = {
  /** Sign-in: a link to our own page that asks for a press, and the code. Wiped from the outbox once sent. */
  M0: z.strictObject({
    link: z.url(),
    code: z.string().regex(/^\d{6}$/),
    minutes: z.int().min(1).max(60),
    /** Given when signing in also confirms the address of an enquiry. */
    enquiry: z.strictObject({ ref: about.ref, title: line }).optional(),
    /** Given when the owner asked somebody in: "Wren Addlecombe has invited you to Marrowfen as a maker." */
    invitedAs: line.optional(),
  }),
  /** Enquiry received. `received` is what was asked for, in facts; `files` are display names. */
  M1: z.strictObject({
    ...about,
    received: z.array(factSchema).max(20),
    files: z.array(line).max(60),
    answerBy: day,
    books: z.enum(['open', 'waiting-list']),
  }),
  /** To the owner: an enquiry, or answers to questions. `name` is the owner's, `customer` who wrote. */
  M2: z.strictObject({
    ...about,
    kind: z.enum(['enquiry', 'answers']),
    customer: line,
    summary: z.array(factSchema).max(30),
    missing: z.array(line).max(20),
    files: z.int().min(0),
  }),
  M3: z.strictObject({
    ...about,
    questions: z
      .array(z.strictObject({ text: words, why: words }))
      .min(1)
      .max(5),
    /** Day the enquiry lapses without an answer. */
    lapsesOn: day.optional(),
  }),
  /** `reason` and `couldChange` are sentences written by the owner or kept with the reason they chose. */
  M5: z.strictObject({ ...about, reason: words, couldChange: words.optional() }),
  M6: z.strictObject({
    ...about,
    low: moneySchema,
    high: moneySchema,
    /** "with 20 % VAT, without carriage", say: what the two sums stand for. */
    basis: line,
    drivers: z.array(line).min(1).max(8),
    assumptions: z.array(line).min(1).max(12),
    leaves: leavesSchema.optional(),
    /** A sentence of the owner's own. */
    note: words.optional(),
  }),
  M7: z.strictObject({ ...quoteBody, note: words.optional() }),
  /** A revised quote; `changes` tells what differs from revision `replaces`. */
  M8: z.strictObject({
    ...quoteBody,
    replaces: z.int().min(1),
    changes: z.array(line).min(1).max(20),
    note: words.optional(),
  }),
  /** To both sides: what was agreed. */
  M11: z.strictObject({
    ...about,
    reader: z.enum(['customer', 'owner']),
    revision: z.int().min(1),
    quoteSha256: sha256,
    termsVersion: line,
    typedName: line,
    acceptedAt: instant,
    total: moneySchema,
    stages: z.array(stagePaymentSchema).min(1).max(6),
    /** The first stage payment, and the day the agreement lapses without it. */
    payFirst: moneySchema,
    payBy: day,
    /** An institution pays by that day on its purchase order; the agreement does not lapse by itself. */
    onCredit: z.boolean().optional(),
  }),
  /** A stage payment was booked. `booked` marks the first one, which reserves the place. */
  M12: z.strictObject({
    ...about,
    booked: z.boolean(),
    label: line,
    amount: moneySchema,
    receiptNo: z.int().min(1),
    paidAt: instant,
    leaves: leavesSchema.optional(),
    /** Place among booked commissions, counted from 1; no names. */
    place: z.int().min(1).optional(),
    /** What is still to come after this payment, and with which stage. */
    toCome: z.strictObject({ amount: moneySchema, next: line }).optional(),
    next: line,
  }),
  M13: z.strictObject({ ...about, amount: moneySchema, heldUntil: day }),
  /** About to start; `facts` are size, alloy, edge, address. */
  M14: z.strictObject({
    ...about,
    resumed: z.boolean(),
    facts: z.array(factSchema).min(1).max(12),
    objectBy: day,
    leaves: leavesSchema.optional(),
  }),
  /** A gate is open: look and approve on the page. Empty lists take the studio's usual words for that gate. */
  M15: z.strictObject({
    ...about,
    gate: gateSchema,
    round: z.int().min(1),
    pictures: z.array(pictureSchema).max(6),
    note: words.optional(),
  }),
  M16: z.strictObject({
    ...about,
    reader: z.enum(['customer', 'owner']),
    gate: gateSchema,
    photoSetSha256: sha256,
    photos: z.int().min(1),
    approvedAt: instant,
    nextPayment: stagePaymentSchema.optional(),
  }),
  /** Progress: `stage` was reached by `reached` of `pieces` pieces; `next` is the stage after it. */
  M19: z.strictObject({
    ...about,
    stage: z.enum(PIECE_STAGES),
    reached: z.int().min(1),
    pieces: z.int().min(1),
    next: z.enum(PIECE_STAGES).optional(),
    pictures: z.array(pictureSchema).max(3),
    leaves: leavesSchema.optional(),
    note: words.optional(),
  }),
  /** A casting was scrapped. `outerMoved`: the promised outer day moves, so the customer may choose. */
  M20: z.strictObject({
    ...about,
    cause: z.enum(causes),
    /** The studio's own words on what happened. */
    note: words.optional(),
    piece: z.int().min(1),
    pieces: z.int().min(1),
    picture: pictureSchema.optional(),
    leaves: leavesSchema.optional(),
    outerMoved: z.boolean(),
  }),
  M23: z.strictObject({
    ...about,
    pictures: z.array(pictureSchema).max(6),
    /** Measured values, one for each piece: mass in g, balance point in mm from the grip or socket end. */
    measured: z
      .array(z.strictObject({ piece: z.int().min(1), massG: z.int().positive(), balanceMm: z.int().min(0).optional() }))
      .min(1)
      .max(200),
    balance: z.strictObject({ amount: moneySchema, dueBy: day }).optional(),
    /** Address it will go to, line by line; empty when the customer has not given one. */
    address: z.array(line).max(8),
  }),
  M24: z.strictObject({
    ...about,
    carrier: line,
    tracking: line,
    adultMustSign: z.boolean(),
    /** Duties and import taxes, when the parcel crosses a border. */
    duties: words.optional(),
    /** What the parcel looks like from outside; says nothing of what is in it. */
    parcel: line,
  }),
  M26: z.strictObject({
    ...about,
    finish: z.enum(['bright', 'patinated', 'as-cast']),
    hafted: z.boolean(),
    bladed: z.boolean(),
    /** Code of the record of making. */
    recordCode: line.optional(),
    /** Last of the 14 days in which to look it over. */
    lookUntil: day,
  }),
} as const satisfies Record<LetterId, z.ZodType>;

/** The data of each letter: `LetterData['M12']`. */
export type LetterData = { [L in LetterId]: z.infer<(typeof LETTER_DATA)[L]> };

/** Checks a letter's data as it is queued or read back; throws a ZodError naming what is wrong (a bug of the caller). */
export function parseLetterData<L extends LetterId>(letter: L, data: unknown): LetterData[L] {
  return LETTER_DATA[letter].parse(data) as LetterData[L];
}
