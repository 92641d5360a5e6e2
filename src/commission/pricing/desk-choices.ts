import type { Desk } from './desk';
import type { QuoteCurrency, QuoteDraft, QuoteMetal, Rush } from './quote-draft';
import { heatMinor, type AlloyRate, type EstimateRates } from './rates';

/** What may be chosen at the quote desk, at today's rates: alloys, currencies, and what a heat costs. */
export interface DeskChoices {
  alloys: QuoteMetal[];
  currencies: QuoteCurrency[];
  /** Tax at home, as a share. */
  taxRate: number;
  heatMinor: number;
  planningLoadG: number;
  largestPourG: number;
}

/** An alloy's prices as a quote keeps them. */
export function metalOf(alloy: AlloyRate): QuoteMetal {
  const { code, plainName, ingotMinorPerKg, returnsMinorPerKg, meltLoss } = alloy;
  return { code, name: plainName, ingotMinorPerKg, returnsMinorPerKg, meltLoss };
}

export function deskChoices(rates: EstimateRates): DeskChoices {
  const studio = rates.currency;
  const foreign = Object.entries(rates.currencies) as [QuoteCurrency['quoted'], { rate: number; buffer: number }][];
  return {
    alloys: rates.alloys.map(metalOf),
    currencies: [
      { studio, quoted: studio, rate: 1, buffer: 0 },
      ...foreign
        .filter(([code]) => code !== studio)
        .map(([quoted, { rate, buffer }]) => ({ studio, quoted, rate, buffer })),
    ],
    taxRate: rates.vatRate,
    heatMinor: heatMinor(rates),
    planningLoadG: rates.planningLoadG,
    largestPourG: rates.largestPourG,
  };
}

/** The alloy chosen: the draft's own keeps the prices it was drafted with, another comes at today's. */
export function chosenMetal(draft: QuoteDraft, code: string, { alloys }: DeskChoices): QuoteMetal {
  if (draft.metal.code === code) return draft.metal;
  return alloys.find((alloy) => alloy.code === code) ?? draft.metal;
}

/** The currency chosen: the draft's own keeps its rate and buffer, another comes at today's. */
export function chosenCurrency(draft: QuoteDraft, code: string, { currencies }: DeskChoices): QuoteCurrency {
  if (draft.currency.quoted === code) return draft.currency;
  return currencies.find((currency) => currency.quoted === code) ?? draft.currency;
}

/** The heats a rushed quote has to itself: as many as its first pours fill. */
export function rushOf(
  draft: Pick<QuoteDraft, 'rush'>,
  isRushed: boolean,
  pouredG: number,
  { heatMinor, largestPourG }: DeskChoices,
): Rush | null {
  if (!isRushed) return null;
  return { heatMinor: draft.rush?.heatMinor ?? heatMinor, heats: Math.max(1, Math.ceil(pouredG / largestPourG)) };
}

/** A sentence for each choice the studio does not offer, by field; empty when all are known. */
export function unknownChoices(draft: QuoteDraft, desk: Desk, choices: DeskChoices): Record<string, string> {
  return {
    ...(chosenMetal(draft, desk.alloy, choices).code === desk.alloy
      ? {}
      : { alloy: 'The studio does not cast that alloy. Choose one from the list.' }),
    ...(chosenCurrency(draft, desk.currency, choices).quoted === desk.currency
      ? {}
      : { currency: 'The studio does not quote in that currency. Choose one from the list.' }),
  };
}

/** Sentences of what the buyer gets that name an alloy name the chosen one. */
export function namingMetal(specification: readonly string[], metal: QuoteMetal, { alloys }: DeskChoices): string[] {
  const names = new Set(alloys.map((alloy) => alloy.name));
  return specification.map((sentence) => {
    const named = [...names].find((name) => sentence === name || sentence.startsWith(`${name},`));
    return named ? metal.name + sentence.slice(named.length) : sentence;
  });
}
