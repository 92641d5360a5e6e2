import { z } from 'zod';
import { amountMinorSchema, currencySchema } from '../money';

const fraction = z.number().min(0).max(1);
const minutes = z.number().int().min(0).max(60_000);
const code = z.string().min(1).max(40);
const name = z.string().min(1).max(120);

/** One alloy lot the studio casts: prices in minor units per kg, density in g/cm3, contraction linear, both as fractions. */
export const alloyRateSchema = z.object({
  code,
  name,
  plainName: name,
  ingotMinorPerKg: amountMinorSchema,
  returnsMinorPerKg: amountMinorSchema,
  densityGPerCm3: z.number().min(5).max(12),
  contraction: z.number().min(0).max(0.05),
  meltLoss: z.number().min(0).max(0.2),
  /** Mass fraction of tin, and whether it is a brass: the pour day orders heats by them. */
  tin: fraction,
  brass: z.boolean(),
});
export type AlloyRate = z.infer<typeof alloyRateSchema>;

/** Three points of actual over estimated hours, and what they are: a tenth were below p10, half below p50, nine tenths below p90. */
export const handFactorSchema = z
  .object({ p10: z.number().positive(), p50: z.number().positive(), p90: z.number().positive() })
  .refine((hand) => hand.p10 <= hand.p50 && hand.p50 <= hand.p90, 'The three hour factors must rise from P10 to P90.');
export type HandFactor = z.infer<typeof handFactorSchema>;

/** A family of pieces that succeed and fail alike: process, core, thinnest section, run and alloy group. */
export const familySchema = z.object({
  code,
  name,
  process: z.enum(['lost-wax', 'sand']),
  /** Chance of a sound pour in the parent family, before the studio's own pours are counted. */
  priorSoundness: z.number().gt(0).lt(1),
  sound: z.number().int().min(0),
  failed: z.number().int().min(0),
  hand: handFactorSchema,
  /** Share of failures that open only under the file. */
  lateShare: fraction,
  /** Cast mass over poured mass, for pieces without a form of their own. */
  castingYield: z.number().gt(0).max(1),
});
export type Family = z.infer<typeof familySchema>;

/** The numbers of the pricing model that a studio may argue with; a frozen quote keeps the ones it was priced with. */
export const pricingConstantsSchema = z.object({
  modelVersion: z.string().min(1).max(40),
  /** Margin as a share of price. */
  margin: z.number().min(0).max(0.9),
  /** Prior counted as this many pours. */
  priorPours: z.number().positive(),
  /** Weights of the P10, P50 and P90 hour scenarios. */
  handWeights: z.tuple([fraction, fraction, fraction]),
  /** Failures are listed one by one up to this number; the rest is lumped one above it. */
  listedFailures: z.number().int().min(1).max(40),
  /** Share of the fettling lost when a fault opens under the file. */
  lostFettlingShare: fraction,
  /** Hand minutes of pieces two and later, as a share of the first piece's. */
  repeatFactor: z.number().gt(0).max(1),
  /** Overtime on hand hours of a rushed piece, as a share of their cost. */
  overtimeShare: fraction,
  /** Prices go up to a whole multiple of this, ranges out to a multiple of the other, in minor units. */
  priceStepMinor: z.number().int().positive(),
  rangeStepMinor: z.number().int().positive(),
  deposits: z.object({
    /** Work below this price has one deposit, no second stage. */
    oneStageBelowMinor: amountMinorSchema,
    minShare: fraction,
    capShare: fraction,
    /** Stages cover as many re-pours as this share of commissions needs. */
    coverProbability: fraction,
    /** A second stage smaller than this is dropped. */
    smallestStageMinor: amountMinorSchema,
  }),
  validityDays: z.number().int().min(1).max(365),
  /** Validity when metal is more than `metalShare` of the cost. */
  metalValidityDays: z.number().int().min(1).max(365),
  metalShare: fraction,
  /** Hours history: the studio's own factors count as `priorCount` pieces; older ratios than the last `keepLast` are dropped. */
  calibration: z.object({ priorCount: z.number().positive(), keepLast: z.number().int().min(1) }),
  /** A held commission is priced again after this many days. */
  repriceHeldAfterDays: z.number().int().min(1),
});
export type PricingConstants = z.infer<typeof pricingConstantsSchema>;

/** Carriage to a group of countries: the first band whose mass the parcel does not exceed. */
export const carriageZoneSchema = z.object({
  code,
  name,
  /** ISO 3166 two-letter codes; an empty list is everywhere else. */
  countries: z.array(z.string().length(2)),
  bands: z.array(z.object({ upToG: z.number().int().positive(), amountMinor: amountMinorSchema })).min(1),
  /** Added when an adult must sign (bladed weapons) or the parcel is worth more than `insureAboveMinor`. */
  signedMinor: amountMinorSchema,
  insureAboveMinor: amountMinorSchema,
  /** Whole price of a bladed weapon longer than `longBladeMm`. */
  longBladeMm: z.number().positive(),
  longBladeMinor: amountMinorSchema,
  /** 'export' is outside the studio's tax; evidence is needed. */
  tax: z.enum(['home', 'export']),
});
export type CarriageZone = z.infer<typeof carriageZoneSchema>;

/** What the date range is made from: hand-hours finished in each of the last weeks, hours queued, waits that no hour shortens. */
export const throughputSchema = z.object({
  finishedHoursByWeek: z.array(z.number().min(0)).min(1).max(60),
  queuedHours: z.number().min(0),
  fixedWaitWeeks: z.number().int().min(0),
  repourWeeks: z.number().int().min(0),
  /** The re-pour cycle joins the outer end when the chance of a failed pour is above this. */
  repourAboveChance: fraction,
});
export type Throughput = z.infer<typeof throughputSchema>;

/** How metal is charged on a pour day; masses in g. */
export const pourDayRatesSchema = z.object({
  /** Charged over poured mass, for spills and the skull, before melt loss. */
  spillAllowance: z.number().min(1).max(2),
  chargeStepG: z.number().int().positive(),
  /** Share of a crucible's brim that may be filled. */
  crucibleFill: fraction,
  /** Most of a charge that may be returns. */
  returnsShare: fraction,
  crucibles: z.array(z.object({ code, brimG: z.number().int().positive(), brassOnly: z.boolean() })).min(1),
});
export type PourDayRates = z.infer<typeof pourDayRatesSchema>;

/** A finish or edge: its minutes as a factor on the form's own line for the studio's usual one (factor 1). */
const routeSchema = z.object({ code, name, factor: z.number().min(0).max(5), extraMaterialsMinor: amountMinorSchema });

/** How the studio reckons a piece it has no form for. Minutes grow with the surface in dm2 and the texture's factor. */
export const ownPieceRatesSchema = z.object({
  intakeMinutes: minutes,
  fileRepairMinutes: minutes,
  patternMinutes: minutes,
  patternMinutesPerDm2: minutes,
  patternMaterialsMinor: amountMinorSchema,
  rubberMaterialsMinorPerDm2: amountMinorSchema,
  gateMinutes: minutes,
  recordMinutes: minutes,
  mouldMinutes: minutes,
  mouldMinutesPerDm2: minutes,
  mouldMaterialsMinor: amountMinorSchema,
  coreMinutes: minutes,
  breakOutMinutes: minutes,
  fettleMinutes: minutes,
  fettleMinutesPerDm2: minutes,
  finishMinutes: minutes,
  finishMinutesPerDm2: minutes,
  edgeMinutesPerDm: minutes,
  haftMinutes: minutes,
  haftMaterialsMinor: amountMinorSchema,
  haftMassG: z.number().int().min(0),
  sundriesMinor: amountMinorSchema,
  textureFactors: z.object({ plain: z.number(), worked: z.number(), ornate: z.number() }),
  /** Sections thinner than this, or pieces longer than that, count as thin. */
  thinSectionMm: z.number().positive(),
  longPieceMm: z.number().positive(),
  /** Cast mass over finished mass: what the files take off. */
  fettlingAllowance: z.number().min(1).max(2),
});
export type OwnPieceRates = z.infer<typeof ownPieceRatesSchema>;

/** Everything the studio prices with. Versioned: a quote stores the version and the numbers it used. */
export const studioRatesSchema = z.object({
  version: z.string().min(1).max(40),
  currency: currencySchema,
  benchRateMinorPerHour: amountMinorSchema,
  deskRateMinorPerHour: amountMinorSchema,
  heat: z.object({
    fuelMinor: amountMinorSchema,
    crucibleWearMinor: amountMinorSchema,
    sundriesMinor: amountMinorSchema,
    crew: z.number().int().min(1),
    crewMinutes: minutes,
  }),
  /** Poured mass one heat's cost is shared over, g. */
  planningLoadG: z.number().int().positive(),
  /** The heaviest casting the largest crucible can pour at once, g. */
  largestPourG: z.number().int().positive(),
  alloys: z.array(alloyRateSchema).min(1),
  families: z.array(familySchema).min(1),
  pricing: pricingConstantsSchema,
  vatRate: fraction,
  /** Owner's currencies: foreign units for one unit of the studio's, and the buffer kept on top. */
  currencies: z.partialRecord(currencySchema, z.object({ rate: z.number().positive(), buffer: fraction })),
  carriage: z.array(carriageZoneSchema).min(1),
  throughput: throughputSchema,
  pourDay: pourDayRatesSchema,
  finishes: z.array(routeSchema).min(1),
  edges: z.array(routeSchema).min(1),
  ownPiece: ownPieceRatesSchema,
  /** Promised finished mass, plus or minus this share. */
  massTolerance: fraction,
  includedRounds: z.number().int().min(0),
});
export type StudioRates = z.infer<typeof studioRatesSchema>;

/** What an estimate is reckoned from: all of the studio's rates but its furnaces. */
export const estimateRatesSchema = studioRatesSchema.omit({ pourDay: true });
export type EstimateRates = z.infer<typeof estimateRatesSchema>;

/** Cost of one heat in minor units: fuel, crucible wear, sundries and the crew's time at the bench rate. */
export function heatMinor(rates: Pick<StudioRates, 'heat' | 'benchRateMinorPerHour'>): number {
  const { fuelMinor, crucibleWearMinor, sundriesMinor, crew, crewMinutes } = rates.heat;
  return (
    fuelMinor + crucibleWearMinor + sundriesMinor + Math.round((crew * crewMinutes * rates.benchRateMinorPerHour) / 60)
  );
}

/** The alloy with this code, or undefined when the studio does not cast it. */
export function findAlloy(rates: Pick<StudioRates, 'alloys'>, alloyCode: string): AlloyRate | undefined {
  return rates.alloys.find((alloy) => alloy.code === alloyCode);
}

/** The family with this code, or undefined. */
export function findFamily(rates: Pick<StudioRates, 'families'>, familyCode: string): Family | undefined {
  return rates.families.find((family) => family.code === familyCode);
}
