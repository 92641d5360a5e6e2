import { estimateRequestSchema, type EstimateRequestInput, type RateCard } from './estimate-request';
import type { PricedForm } from './form';

/** Names of the inputs of an estimate, as a plain form and a page's address carry them. */
export type EstimateField = keyof EstimateRequestInput;
export const ESTIMATE_FIELDS = Object.keys(estimateRequestSchema.shape) as EstimateField[];

/** What stands in the inputs, as text. A ticked box is 'on', an empty one ''. */
export type EstimateFields = Partial<Record<EstimateField, string>>;

export const TICKS = ['cored', 'bladed', 'rush'] as const satisfies readonly EstimateField[];
const FORM_ONLY = ['form', 'lengthMm', 'widthMm', 'thicknessMm'] as const satisfies readonly EstimateField[];
const OWN_ONLY = [
  'description',
  'massG',
  'volumeMm3',
  'longestMm',
  'thinnestMm',
  'cored',
  'bladed',
  'texture',
] as const satisfies readonly EstimateField[];
/** Longest text any of the inputs takes; what is longer was not typed into one. */
const LONGEST = 600;

/** The inputs named in an address or a posted form; the last of several wins, unknown names are left out. */
export function readFields(entries: Iterable<readonly [string, unknown]>): EstimateFields {
  const fields: EstimateFields = {};
  for (const [name, value] of entries) {
    const field = ESTIMATE_FIELDS.find((known) => known === name);
    if (field && typeof value === 'string') fields[field] = value.slice(0, LONGEST);
  }
  return fields;
}

/** What stands in a form's inputs while nobody has changed anything. */
export function ownChoices(form: PricedForm): EstimateFields {
  const { length, width, thickness } = form.dimensionsMm;
  return {
    form: form.slug,
    alloy: form.alloy,
    finish: form.work.finish,
    edge: form.intendedEdges.length > 0 ? form.work.edge : '',
    haft: form.haft.length > 0 ? (form.work.haft ?? 'none') : '',
    lengthMm: String(length),
    widthMm: String(width),
    thicknessMm: thickness === undefined ? '' : String(thickness),
  };
}

/**
 * Inputs after another form was chosen: sizes, edge, haft and hours belonged to the earlier one (`sized`, its slug) and
 * start from the new form's own; an alloy or finish that fits stays.
 */
export function settleForm(fields: EstimateFields, sized: string | undefined, { forms }: RateCard): EstimateFields {
  const form = forms.find(({ slug }) => slug === fields.form);
  if (!form || sized === undefined || sized === form.slug) return fields;
  const own = ownChoices(form);
  const alloy = fields.alloy && form.alloys.includes(fields.alloy) ? fields.alloy : own.alloy;
  return { ...fields, ...own, alloy, finish: fields.finish || own.finish, finishHours: '' };
}

const USUAL: EstimateFields = {
  what: 'form',
  pieces: '1',
  destination: 'GB',
  buyer: 'consumer',
  texture: 'plain',
};

/** What a piece of the buyer's own is reckoned with while nothing is said. */
function usualOfOwn({ alloys, finishes, edges }: RateCard['rates']): EstimateFields {
  const finish = finishes.find(({ factor }) => factor === 1)?.code;
  return { alloy: alloys[0]?.code, finish, edge: edges[0]?.code, haft: 'none' };
}

/** The inputs that differ from what the page shows by itself, as a query: short enough to send to somebody. */
export function estimateQuery(fields: EstimateFields, { rates, forms }: RateCard): string {
  const own = fields.what === 'own';
  const form = own ? undefined : forms.find(({ slug }) => slug === fields.form);
  const usual: EstimateFields = {
    ...USUAL,
    currency: rates.currency,
    ...(form ? { ...ownChoices(form), form: undefined } : usualOfOwn(rates)),
  };
  const unused: readonly EstimateField[] = own ? FORM_ONLY : OWN_ONLY;
  const said = ESTIMATE_FIELDS.flatMap((field): [string, string][] => {
    const value = fields[field]?.trim() ?? '';
    return value === '' || value === usual[field] || unused.includes(field) ? [] : [[field, value]];
  });
  return new URLSearchParams(said).toString();
}
