import { z } from 'zod';
import { amountField, decimal, unflatten, wholeNumber } from '../input-fields';
import type { StudioRates } from './rates';

const AMOUNT = 'Give an amount such as 38.00.';
const PERCENT = 'Give a percentage such as 20 or 2.5.';
const SHARE = 'Chances lie above 0 and below 100 %.';
const COUNT = 'Give a whole number of pours.';
const FACTOR = 'Give a factor such as 0.85, 1.00 or 1.30.';
const percentField = (message: string, most: number) => decimal(message, 0, most).transform((percent) => percent / 100);

/** The rates as the owner edits them: amounts typed in whole units are kept in minor ones, percentages as fractions. */
export const ratesFormSchema = z.preprocess(
  unflatten,
  z.object({
    /** The version these figures were typed over. */
    from: z.string('Reload the page: the version was lost on the way.').min(1).max(60),
    /** When the figures were shown; pours broken out since are added to the typed counts. */
    shownAt: z.iso.datetime({ offset: true, error: 'Reload the page: its time was lost on the way.' }),
    benchRateMinorPerHour: amountField(AMOUNT, 1000),
    deskRateMinorPerHour: amountField(AMOUNT, 1000),
    fuelMinor: amountField(AMOUNT, 10_000),
    crucibleWearMinor: amountField(AMOUNT, 10_000),
    sundriesMinor: amountField(AMOUNT, 10_000),
    crew: wholeNumber('Give the number of people at a heat.', 1, 20),
    crewHours: decimal('Give the hours of one heat, such as 1.5.', 0, 100),
    planningLoadG: wholeNumber('Give the planning load in grams.', 100, 100_000),
    margin: percentField(PERCENT, 80),
    alloys: z.array(
      z.object({
        code: z.string().min(1),
        ingotMinorPerKg: amountField(AMOUNT, 10_000),
        returnsMinorPerKg: amountField(AMOUNT, 10_000),
        meltLoss: percentField(PERCENT, 20),
      }),
    ),
    families: z.array(
      z
        .object({
          code: z.string().min(1),
          priorSoundness: decimal(SHARE, 0.1, 99.9).transform((percent) => percent / 100),
          sound: wholeNumber(COUNT, 0, 100_000),
          failed: wholeNumber(COUNT, 0, 100_000),
          p10: decimal(FACTOR, 0.1, 10),
          p50: decimal(FACTOR, 0.1, 10),
          p90: decimal(FACTOR, 0.1, 10),
          lateShare: percentField(PERCENT, 100),
        })
        .refine((family) => family.p10 <= family.p50 && family.p50 <= family.p90, {
          message: 'The three factors must rise from the first to the last.',
          path: ['p50'],
        }),
    ),
  }),
);
export type RatesForm = z.output<typeof ratesFormSchema>;

const plain = (value: number) => String(Number(value.toFixed(6)));
const major = (minor: number) => (minor / 100).toFixed(2);
const percentOf = (share: number) => plain(share * 100);

/** The form's fields by name, as text to show in it: `alloys.0.meltLoss` = '2.5'. */
export function ratesFields(rates: StudioRates, shownAt: Date): Record<string, string> {
  const fields: Record<string, string> = {
    from: rates.version,
    shownAt: shownAt.toISOString(),
    benchRateMinorPerHour: major(rates.benchRateMinorPerHour),
    deskRateMinorPerHour: major(rates.deskRateMinorPerHour),
    fuelMinor: major(rates.heat.fuelMinor),
    crucibleWearMinor: major(rates.heat.crucibleWearMinor),
    sundriesMinor: major(rates.heat.sundriesMinor),
    crew: String(rates.heat.crew),
    crewHours: plain(rates.heat.crewMinutes / 60),
    planningLoadG: String(rates.planningLoadG),
    margin: percentOf(rates.pricing.margin),
  };
  rates.alloys.forEach((alloy, index) => {
    fields[`alloys.${index}.code`] = alloy.code;
    fields[`alloys.${index}.ingotMinorPerKg`] = major(alloy.ingotMinorPerKg);
    fields[`alloys.${index}.returnsMinorPerKg`] = major(alloy.returnsMinorPerKg);
    fields[`alloys.${index}.meltLoss`] = percentOf(alloy.meltLoss);
  });
  rates.families.forEach((family, index) => {
    const { code, priorSoundness, sound, failed, hand, lateShare } = family;
    const values = { code, sound, failed, p10: hand.p10, p50: hand.p50, p90: hand.p90 };
    for (const [name, value] of Object.entries(values)) fields[`families.${index}.${name}`] = String(value);
    fields[`families.${index}.priorSoundness`] = percentOf(priorSoundness);
    fields[`families.${index}.lateShare`] = percentOf(lateShare);
  });
  return fields;
}

/** The rates with the form's figures put in. Alloys and families the form does not name stay as they are. */
export function applyRates(rates: StudioRates, form: RatesForm): StudioRates {
  return {
    ...rates,
    benchRateMinorPerHour: form.benchRateMinorPerHour,
    deskRateMinorPerHour: form.deskRateMinorPerHour,
    heat: {
      fuelMinor: form.fuelMinor,
      crucibleWearMinor: form.crucibleWearMinor,
      sundriesMinor: form.sundriesMinor,
      crew: form.crew,
      crewMinutes: Math.round(form.crewHours * 60),
    },
    planningLoadG: form.planningLoadG,
    pricing: { ...rates.pricing, margin: form.margin },
    alloys: rates.alloys.map((alloy) => {
      const typed = form.alloys.find((each) => each.code === alloy.code);
      if (!typed) return alloy;
      const { ingotMinorPerKg, returnsMinorPerKg, meltLoss } = typed;
      return { ...alloy, ingotMinorPerKg, returnsMinorPerKg, meltLoss };
    }),
    families: rates.families.map((family) => {
      const typed = form.families.find((each) => each.code === family.code);
      if (!typed) return family;
      const { priorSoundness, sound, failed, lateShare, p10, p50, p90 } = typed;
      return { ...family, priorSoundness, sound, failed, lateShare, hand: { p10, p50, p90 } };
    }),
  };
}
