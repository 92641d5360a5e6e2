import type { CostLine } from '../../commission/pricing/cost-lines';
import type { DeskChoices } from '../../commission/pricing/desk-choices';
import { deskSchema } from '../../commission/pricing/desk';
import { applyDesk, fieldsWithTyped, type DeskFields } from '../../commission/pricing/desk-fields';
import type { PricedQuote } from '../../commission/pricing/pricing-results';
import { diffQuotes } from '../../commission/pricing/quote-diff';
import { priceQuote } from '../../commission/pricing/quote';
import type { QuoteDraft } from '../../commission/pricing/quote-draft';

/** A desk as it stands: the draft it makes and its price; while a field cannot be read, the last ones that could. */
export interface DeskReading {
  draft: QuoteDraft;
  priced: PricedQuote;
  /** Sentence of each field that cannot be read, by its name. */
  errors: Record<string, string>;
}

/** Reads the desk's fields by the server's own schema and prices them by the server's own function. */
export function readDesk(
  saved: QuoteDraft,
  fields: DeskFields,
  choices: DeskChoices,
  before?: DeskReading,
): DeskReading {
  const parsed = deskSchema.safeParse(fields);
  if (parsed.success) {
    const draft = applyDesk(saved, parsed.data, choices, true);
    return { draft, priced: priceQuote(draft), errors: {} };
  }
  const errors: Record<string, string> = {};
  for (const issue of parsed.error.issues) errors[issue.path.join('.')] ??= issue.message;
  return before ? { ...before, errors } : { draft: saved, priced: priceQuote(saved), errors };
}

/** What was typed over a draft that another window has changed meanwhile, a sentence for each difference. */
export function differencesOf(saved: QuoteDraft, typed: QuoteDraft): string[] {
  return diffQuotes(saved, typed).map((change) => `${change.label}: saved ${change.before}, typed ${change.after}`);
}

/** The cost line that each row stands for, in the rows' order; null for a blank row and one left out. */
export function linesOfRows(draft: QuoteDraft, rows: DeskFields['lines']): (CostLine | null)[] {
  let next = 0;
  return rows.map((row) => {
    if (row.drop || (row.id === '' && row.label.trim() === '')) return null;
    next += 1;
    return draft.lines[next - 1] ?? null;
  });
}

/** What was typed into the plain form before its script came: in the browser the form's own values, else the given ones. */
export function typedBefore(formId: string, fields: DeskFields): DeskFields {
  if (typeof document === 'undefined') return fields;
  const form = document.getElementById(formId);
  if (!(form instanceof HTMLFormElement)) return fields;
  const texts = [...new FormData(form)].filter((entry): entry is [string, string] => typeof entry[1] === 'string');
  return fieldsWithTyped(fields, Object.fromEntries(texts));
}
