import { estimateRequestSchema, type EstimateRequestInput, type RateCard } from './estimate-request';
import type { PricedForm } from './form';

/** Names of the inputs of an estimate, as a plain form and a page's address carry them. */
export type EstimateField = keyof EstimateRequestInput;
export const ESTIMATE_FIELDS = Object.keys(estimateRequestSchema.shape) as EstimateField[];

/** What stands in the inputs, as text. A ticked box is 'on', an empty one ''. */
export type EstimateFields = Partial<Record<EstimateField, string>>;

export const TICKS = ['cored', 'bladed', 'rush'] as const satisfies readonly EstimateField[];
/** Inputs that only a form of the studio has, and those that only a piece of one's own has. */
export const FORM_ONLY = ['form', 'lengthMm', 'widthMm', 'thicknessMm'] as const satisfies readonly EstimateField[];
export const OWN_ONLY = [
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

const SIZED = ['lengthMm', 'widthMm', 'thicknessMm', 'edge', 'haft', 'finishHours'] as const satisfies EstimateField[];

const spoken = (fields: EstimateFields): EstimateFields =>
  Object.fromEntries(Object.entries(fields).filter(([, value]) => value.trim() !== ''));

/** Alloy, edge and haft that the chosen form does not come in give way to its own. */
function fitting(fields: EstimateFields, form: PricedForm): EstimateFields {
  const usual = ownChoices(form);
  const offers = {
    alloy: form.alloys,
    edge: form.intendedEdges as string[],
    haft: ['none', ...form.haft.map(({ code }) => code)],
  };
  const fits = (field: keyof typeof offers) => offers[field].includes(fields[field] ?? '');
  return {
    ...fields,
    alloy: fits('alloy') ? fields.alloy : usual.alloy,
    edge: fits('edge') ? fields.edge : usual.edge,
    haft: fits('haft') ? fields.haft : usual.haft,
  };
}

/**
 * Every input with what stands in it when only some were said. `sized` is the form that the sizes belong to: after
 * another was chosen they start from that one's own, and what does not fit it gives way. Without `sized`, as in an
 * address written by hand, what does not fit stays and is refused.
 */
export function settleFields(
  typed: EstimateFields,
  sized: string | undefined,
  { rates, forms }: RateCard,
  firstForm: string,
): EstimateFields {
  const said = spoken(typed);
  const base = { ...USUAL, currency: rates.currency, form: firstForm };
  if (said.what === 'own') {
    const haft = ['none', 'haft'].includes(said.haft ?? '') ? said.haft : 'none';
    return { ...base, ...usualOfOwn(rates), ...said, haft };
  }
  const form = forms.find(({ slug }) => slug === (said.form ?? firstForm));
  if (!form) return { ...base, ...said };
  const isOther = sized !== undefined && sized !== form.slug;
  const kept = isOther
    ? Object.fromEntries(Object.entries(said).filter(([field]) => !SIZED.some((name) => name === field)))
    : said;
  const fields = { ...base, ...ownChoices(form), ...kept };
  return sized === undefined ? fields : fitting(fields, form);
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

/** The inputs as a query, word for word: nothing typed is lost, whether it can be priced or not. */
export function spokenQuery(fields: EstimateFields): string {
  return new URLSearchParams(Object.entries(spoken(fields))).toString();
}
