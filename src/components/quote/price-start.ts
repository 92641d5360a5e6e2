import { estimateQuery, readFields, settleFields, type EstimateFields } from '../../commission/pricing/estimate-fields';
import type { RateCard } from '../../commission/pricing/estimate-request';
import { priceView, type Choice, type PriceView } from '../../commission/pricing/price-view';

/** What the price page begins with: drawn by the server, taken over by the page. */
export interface PriceStart {
  fields: EstimateFields;
  view: PriceView;
  /** True when nothing was said in the address, so that what this browser kept may come back. */
  bare: boolean;
  /** True when a price was asked for: inputs left empty are then told so. */
  pressed: boolean;
}

/** Where a pressed button leads instead of to the page, or what the page begins with. */
export type PriceAnswer = { goTo: string } | PriceStart;

/**
 * Reads the price page's address as its form sends it. `go` is the pressed button, `lever` a change to make first,
 * `sized` the form that the sizes were typed for.
 */
export function readPriceQuery(query: URLSearchParams, card: RateCard, firstForm: string): PriceAnswer {
  const typed = readFields(query);
  const fields = settleFields(typed, query.get('sized') ?? undefined, card, firstForm);
  const view = priceView(fields, card);
  const lever = view.outcome.ok && view.outcome.value.levers.find(({ id }) => id === query.get('lever'));
  if (lever) {
    const changed = { ...fields, ...changeText(lever.change) };
    return { goTo: pricePath(estimateQuery(changed, card)) };
  }
  const go = query.get('go');
  if (go === 'enquire' && view.outcome.ok) return { goTo: `/price/enquire?${estimateQuery(fields, card)}` };
  return { fields, view, bare: Object.keys(typed).length === 0, pressed: go !== null };
}

/** The price page with a query. */
export function pricePath(query: string): string {
  return query ? `/price?${query}` : '/price';
}

/** A lever's change as its inputs take it: a box is 'on' or ''. */
export function changeText(change: Record<string, string | number | boolean>): EstimateFields {
  const text = (value: string | number | boolean) => (typeof value === 'boolean' ? (value ? 'on' : '') : String(value));
  return Object.fromEntries(Object.entries(change).map(([field, value]) => [field, text(value)]));
}

/** Forms for the list, with their period. */
export function formChoices(forms: readonly { slug: string; name: string; period: string }[]): Choice[] {
  return forms.map(({ slug, name, period }) => ({ code: slug, name: `${name} (${period})` }));
}
