import { z } from 'zod';
import data from './alloy-data.json';

/**
 * Handbook values of casting alloys. Composition mass %, density g/cm3 at 20 C, temperatures C, linear shrinkage %,
 * strength MPa. Every value names its source: a key of `sources`, or one of the three marks below.
 */

/** Marks that are no publication: never looked up, the trade's habit without a source, reckoned from the other values. */
export const unsourced = ['memory', 'practice', 'calc_here'] as const;

const source = z.string().min(1);
const notes = z.array(z.string().min(1)).optional();
const sourced = <T extends z.ZodType>(value: T) => z.object({ value, source, notes });
const band = z.object({ low: z.number(), high: z.number() });
const parts = z.record(z.string(), z.number());

export const alloySchema = z.object({
  id: z.string(),
  name: z.string(),
  group: z.enum(['tin', 'silicon', 'brass', 'strong', 'other']),
  /** Number in the unified numbering system, where the alloy has one. */
  uns: z.string().nullable(),
  en1982: sourced(z.string()).nullable(),
  otherNames: z.array(z.string()),
  compositionPct: sourced(parts),
  limitsPct: sourced(z.record(z.string(), z.object({ min: z.number().optional(), max: z.number().optional() }))),
  densityGPerCm3: sourced(z.number()),
  solidusC: sourced(z.number()),
  liquidusC: sourced(z.number()),
  shrinkagePct: sourced(band).nullable(),
  /** Pouring temperature for light and heavy pieces, or one band for all. */
  pourC: sourced(z.object({ light: band.optional(), heavy: band.optional(), all: band.optional() })),
  mechanical: z.object({
    temper: z.string(),
    tensileMpa: band.nullable(),
    yieldMpa: band.nullable(),
    elongationPct: band.nullable(),
    hardness: z.string().nullable(),
    source,
    notes,
  }),
  feeding: z.string(),
  meltLoss: z.string(),
  colour: sourced(z.string()),
  /** The colour as a swatch, an approximation for the screen. */
  swatch: z.string().regex(/^#[0-9a-f]{6}$/),
  suits: z.object({
    hammeredEdge: z.string(),
    blade: z.string(),
    ornament: z.string(),
    foodContact: z.string(),
    source,
  }),
  hazards: z.array(z.string()),
  lead: z.boolean(),
});
export type Alloy = z.infer<typeof alloySchema>;
export type Band = z.infer<typeof band>;

const refusedSchema = z.object({
  id: z.string(),
  names: z.array(z.string()),
  compositionPct: sourced(z.record(z.string(), z.union([z.number(), z.tuple([z.number(), z.number()])]))).nullable(),
  /** Refused only as long as this is missing. */
  without: z.string().nullable(),
  reason: z.string(),
  source,
});
export type RefusedMetal = z.infer<typeof refusedSchema>;

const tableSchema = z.object({
  sources: z.record(z.string(), z.string()),
  groups: z.record(z.string(), z.string()),
  alloys: z.array(alloySchema),
  refuse: z.array(refusedSchema),
});
const table = tableSchema.parse(data);

/** The alloys in the order of the page, group by group. */
export const alloys: readonly Alloy[] = table.alloys;
/** Metals the studio does not melt, with the reason. */
export const refusedMetals: readonly RefusedMetal[] = table.refuse;
/** What each source key stands for. */
export const alloySources: Readonly<Record<string, string>> = table.sources;
/** Plain names of the groups. */
export const alloyGroups: Readonly<Record<string, string>> = table.groups;

/** The alloy with this id, or undefined. */
export function alloyById(id: string): Alloy | undefined {
  return alloys.find((alloy) => alloy.id === id);
}

/** Width of the freezing range in C: liquidus less solidus. */
export function freezingRangeC(alloy: Pick<Alloy, 'solidusC' | 'liquidusC'>): number {
  return alloy.liquidusC.value - alloy.solidusC.value;
}

/** How an alloy freezes: short under 50 C, intermediate to 110 C, long above (foundry groups I to III, from memory). */
export function freezingGroup(alloy: Pick<Alloy, 'solidusC' | 'liquidusC'>): 'short' | 'intermediate' | 'long' {
  const range = freezingRangeC(alloy);
  if (range < 50) return 'short';
  return range <= 110 ? 'intermediate' : 'long';
}
