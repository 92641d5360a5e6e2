import { useEffect, useMemo, useState } from 'react';
import { useForm, type UseFormRegisterReturn } from 'react-hook-form';
import {
  ESTIMATE_FIELDS,
  estimateQuery,
  settleFields,
  TICKS,
  type EstimateField,
  type EstimateFields,
} from '../../commission/pricing/estimate-fields';
import { rateCardSchema, type RateCard } from '../../commission/pricing/estimate-request';
import { priceView, type PriceView } from '../../commission/pricing/price-view';
import type { Estimate } from '../../commission/pricing/pricing-results';
import { keepDraft, readDraft } from './draft';
import { fetchJson } from './fetch-json';
import type { PriceStart } from './price-start';
import { typedBefore } from './typed-before';

export const PRICE_FORM = 'price-form';

/** The price page's inputs and what follows from them. */
export interface Price {
  fields: EstimateFields;
  view: PriceView;
  /** The estimate, or the last one there was while the inputs allow none. */
  estimate: Estimate | null;
  /** True while only inputs are missing that nobody has come to yet. */
  untold: boolean;
  /** True once the page reckons by itself; before that its form is sent to the server. */
  live: boolean;
  /** The inputs as the page's address has them; null before the page reckons by itself. */
  query: string | null;
  errorOf: (field: EstimateField) => string | undefined;
  register: (field: EstimateField, onChange?: (value: string) => void) => UseFormRegisterReturn;
  /** Puts figures into inputs. */
  set: (changes: EstimateFields) => void;
  /** Makes a change that others follow from: another form, a piece of one's own, a lever. */
  change: (changes: EstimateFields) => void;
  /** Tells from now on which inputs are missing. */
  press: () => void;
}

type Typed = Partial<Record<EstimateField, string | boolean>>;

/** Inputs as text: react-hook-form knows a box as true or false. */
function textOf(typed: Typed): EstimateFields {
  return Object.fromEntries(
    ESTIMATE_FIELDS.flatMap((field) => {
      const value = typed[field];
      return value === undefined || value === null ? [] : [[field, value === true ? 'on' : value || '']];
    }),
  );
}

async function fetchCard(): Promise<RateCard | null> {
  const parsed = rateCardSchema.safeParse(await fetchJson('/api/rates/card'));
  return parsed.success ? parsed.data : null;
}

/**
 * What the inputs are to become once the page reckons by itself: what this browser kept, or what follows from another
 * form that was chosen before the scripts arrived. Null to leave them as they stand.
 */
function settledStart(start: PriceStart, typed: EstimateFields, card: RateCard): EstimateFields | null {
  const form = start.fields.form ?? '';
  if (typed.form && typed.form !== form) return settleFields(typed, form, card, form);
  const { estimate: kept } = readDraft();
  return start.bare && kept ? settleFields(kept, undefined, card, form) : null;
}

/** The inputs, and the rate card once it is here; what this browser kept comes back when nothing was said. */
function useInputs(start: PriceStart) {
  const [before] = useState(() => ({ ...start.fields, ...typedBefore(PRICE_FORM, TICKS) }));
  const { subscribe, getValues, setValue, register } = useForm<Typed>({ defaultValues: before });
  const [fields, setFields] = useState(start.fields);
  const [card, setCard] = useState<RateCard | null>(null);
  const set = (changes: EstimateFields) => {
    for (const [field, value] of Object.entries(changes)) setValue(field as EstimateField, value);
    setFields(textOf(getValues()));
  };
  useEffect(() => {
    let gone = false;
    void fetchCard().then((fetched) => {
      if (gone || !fetched) return;
      const settled = settledStart(start, textOf(getValues()), fetched);
      if (settled) for (const field of ESTIMATE_FIELDS) setValue(field, settled[field] ?? '');
      setFields(textOf(getValues()));
      setCard(fetched);
    });
    const stop = subscribe({
      formState: { values: true },
      callback: ({ values }) => setFields(textOf(values)),
    });
    return () => {
      gone = true;
      stop();
    };
  }, [getValues, setValue, subscribe, start]);
  return { fields, card, set, register };
}

/** Runs the price page: inputs, estimate at every change, address, draft. */
export function usePrice(start: PriceStart): Price {
  const { fields, card, set, register } = useInputs(start);
  const [pressed, setPressed] = useState(start.pressed);
  const view = useMemo(() => (card ? priceView(fields, card) : start.view), [card, fields, start.view]);
  const query = useMemo(() => (card ? estimateQuery(fields, card) : null), [card, fields]);
  const estimate = useLastEstimate(view, fields.what);
  useKept(fields, query);
  const problems = view.outcome.ok ? {} : (view.outcome.problem.fields ?? {});
  const said = (field: string) => Boolean(pressed || fields[field as EstimateField]);
  return {
    fields,
    view,
    estimate,
    live: card !== null,
    query,
    untold: !view.outcome.ok && Object.keys(problems).length > 0 && !Object.keys(problems).some(said),
    errorOf: (field) => (said(field) ? problems[field] : undefined),
    register: (field, onChange) =>
      register(field, onChange && { onChange: ({ target }: { target: HTMLInputElement }) => onChange(target.value) }),
    set,
    change: (changes) => {
      if (card) set(settleFields({ ...fields, ...changes }, fields.form, card, fields.form ?? ''));
    },
    press: () => setPressed(true),
  };
}

/** The estimate, or the last one there was for a piece of this kind. */
function useLastEstimate({ outcome }: PriceView, what: string | undefined): Estimate | null {
  const [last, setLast] = useState({ what, estimate: outcome.ok ? outcome.value : null });
  if (outcome.ok && outcome.value !== last.estimate) setLast({ what, estimate: outcome.value });
  if (outcome.ok) return outcome.value;
  return last.what === what ? last.estimate : null;
}

/** Keeps the inputs in the page's address and in this browser, a moment after the last change. */
function useKept(fields: EstimateFields, query: string | null) {
  useEffect(() => {
    if (query === null) return;
    const timer = setTimeout(() => {
      window.history.replaceState(window.history.state, '', `${window.location.pathname}${query && `?${query}`}`);
      keepDraft({ estimate: fields });
    }, 250);
    return () => clearTimeout(timer);
  }, [fields, query]);
}
