import { z } from 'zod';
import { drawingSchema } from '../../casting/drawing';
import { amountMinorSchema } from '../money';

const millimetres = z.number().positive().max(2000);
const grams = z.number().int().positive().max(20_000);
const text = z.string().min(1).max(600);

/** Groups of work in a form; the metal lines come from the masses and the alloy. */
export const workGroupSchema = z.enum(['before-gate', 'after-gate', 'attempt', 'hand', 'sundries']);

/** The studio's usual minutes and materials for one line of a form, at the form's own size. */
export const workLineSchema = z.object({
  id: z.string().min(1).max(60),
  label: z.string().min(1).max(120),
  group: workGroupSchema,
  minutes: z.number().int().min(0).max(6000),
  rate: z.enum(['bench', 'desk']),
  materialsMinor: amountMinorSchema,
  per: z.enum(['commission', 'piece']),
  /** What the minutes and materials grow with when the dimensions change. */
  scalesWith: z.enum(['nothing', 'length', 'area', 'mass']),
  /** Fettling, edge, finishing and haft lines answer to the request; other lines are 'other'. */
  role: z.enum(['fettle', 'edge', 'finish', 'haft', 'other']),
});
export type WorkLine = z.infer<typeof workLineSchema>;

/** What one form costs the studio in hours and materials. */
export const workSchema = z.object({
  lines: z.array(workLineSchema).min(1).max(40),
  /** Finish and edge the lines above were reckoned for (codes of the studio's rates). */
  finish: z.string().min(1),
  edge: z.string().min(1),
  /** The haft the lines include when none is asked for; null when the form comes without. */
  haft: z.string().nullable(),
  /** Added when the piece is wanted at another size than the studio's pattern. */
  newPattern: z.object({ minutes: z.number().int().min(0), materialsMinor: amountMinorSchema }),
  /** Mass one haft adds to the parcel, g. */
  haftMassG: z.number().int().min(0).max(5000),
});

export const haftOptionSchema = z.object({ code: z.string().min(1).max(40), name: text });

/** One form of the catalogue: a kind of piece the studio casts after you order. Lengths mm, masses g. */
export const formSchema = z.object({
  slug: z.string().regex(/^[a-z0-9-]+$/),
  name: text,
  period: text,
  region: text.optional(),
  /** The kind of find it is made after, without naming an owner. */
  after: text,
  /** Plain words about the form, in the studio's own voice: two sentences, then paragraphs. */
  summary: text,
  description: z.array(z.string().min(1).max(1200)).min(1).max(6),
  dimensionsMm: z.object({ length: millimetres, width: millimetres, thickness: millimetres.optional() }),
  massesG: z.object({ finished: grams, cast: grams, poured: grams }),
  /** Codes of the alloys offered, and the one the form is shown in. */
  alloys: z.array(z.string()).min(1),
  alloy: z.string(),
  family: z.enum(['thin', 'compact', 'cored', 'ornate']),
  bladed: z.boolean(),
  kind: z.enum(['blade', 'tool', 'ornament']),
  intendedEdges: z.array(z.enum(['blunt', 'as-cast', 'hammered', 'sharp'])),
  haft: z.array(haftOptionSchema),
  cautions: z.array(text),
  drawing: drawingSchema,
  work: workSchema,
});
export type Form = z.infer<typeof formSchema>;

/** The part of a form that pricing needs: no drawing, no words. The rate card carries these. */
export const pricedFormSchema = formSchema.omit({
  drawing: true,
  summary: true,
  description: true,
  after: true,
  cautions: true,
  region: true,
});
export type PricedForm = z.infer<typeof pricedFormSchema>;
