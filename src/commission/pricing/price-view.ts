import { estimate } from './estimate';
import type { EstimateFields } from './estimate-fields';
import { estimateRequestSchema, type RateCard } from './estimate-request';
import type { PricedForm } from './form';
import type { Currency } from '../money';
import type { Estimate } from './pricing-results';
import { problemFrom } from '../problem-from';
import type { Outcome } from '../problem';

/** One thing to choose, with its name. */
export interface Choice {
  code: string;
  name: string;
}

/** What the price page offers for what stands in its inputs. */
export interface PriceChoices {
  /** The chosen form; null for a piece of the buyer's own, and while the form is unknown. */
  form: Pick<PricedForm, 'slug' | 'name' | 'period' | 'dimensionsMm' | 'bladed'> | null;
  alloys: (Choice & { densityGPerCm3: number })[];
  finishes: Choice[];
  /** Empty when the piece has no edge. */
  edges: Choice[];
  /** Empty when nothing is fitted to the piece. */
  hafts: Choice[];
  currencies: Currency[];
}

/** Everything the price page shows, from what stands in its inputs; the same in the page and on the server. */
export interface PriceView {
  choices: PriceChoices;
  outcome: Outcome<Estimate>;
}

function choicesFor(fields: EstimateFields, { rates, forms }: RateCard): PriceChoices {
  const own = fields.what === 'own';
  const form = (!own && forms.find(({ slug }) => slug === fields.form)) || null;
  const named = ({ code, name }: Choice): Choice => ({ code, name });
  const edged = form ? form.intendedEdges : own && fields.bladed === 'on' ? rates.edges.map(({ code }) => code) : [];
  const without = { code: 'none', name: 'Without' };
  const hafts = own ? [{ code: 'haft', name: 'With a haft or handle fitted' }] : (form?.haft ?? []);
  return {
    form: form && {
      slug: form.slug,
      name: form.name,
      period: form.period,
      dimensionsMm: form.dimensionsMm,
      bladed: form.bladed,
    },
    alloys: rates.alloys
      .filter(({ code }) => (form ? form.alloys.includes(code) : own))
      .map(({ code, plainName, densityGPerCm3 }) => ({ code, name: plainName, densityGPerCm3 })),
    finishes: rates.finishes.map(named),
    edges: rates.edges.filter(({ code }) => edged.some((edge) => edge === code)).map(named),
    hafts: hafts.length > 0 ? [without, ...hafts.map(named)] : [],
    currencies: [rates.currency, ...(Object.keys(rates.currencies) as Currency[])],
  };
}

/** The estimate for what stands in the inputs, or what has to change; checked by the one schema. */
export function reckon(fields: EstimateFields, card: RateCard): Outcome<Estimate> {
  const parsed = estimateRequestSchema.safeParse(fields);
  return parsed.success ? estimate(parsed.data, card) : { ok: false, problem: problemFrom(parsed.error) };
}

/** Choices and estimate for what stands in the inputs. */
export function priceView(fields: EstimateFields, card: RateCard): PriceView {
  return { choices: choicesFor(fields, card), outcome: reckon(fields, card) };
}
