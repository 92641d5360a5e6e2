import { customerLines } from './customer-lines';
import { bufferedRate, quotedPrice } from './currency';
import { draftForRequest, findSubject, type Subject } from './estimate-draft';
import type { EstimateRequest, RateCard } from './estimate-request';
import { assumptionsOf, risksOf } from './estimate-words';
import { alloyDifferences, cheaperLevers, type Reprice } from './levers';
import { ceilToStep, floorToStep } from '../money';
import { priceWithMargin } from './price';
import type { Bin, Estimate, PricedQuote } from './pricing-results';
import { done, type Outcome } from '../problem';
import { priceQuote } from './quote';
import type { QuoteDraft } from './quote-draft';
import { usualValidityDays } from './quote-warnings';

/** Cost in the studio's currency as the price it comes to in the quoted one, not rounded to a step. */
function asPrice(draft: QuoteDraft, costMinor: number): number {
  const foreign = draft.currency.quoted !== draft.currency.studio;
  return priceWithMargin(costMinor, draft.pricing.margin) * (foreign ? bufferedRate(draft.currency) : 1);
}

function pricedBins(draft: QuoteDraft, bins: readonly Bin[]): Bin[] {
  return bins.map((bin) => ({
    fromMinor: Math.round(asPrice(draft, bin.fromMinor)),
    toMinor: Math.round(asPrice(draft, bin.toMinor)),
    probability: bin.probability,
  }));
}

/** Range and likely prices in the quoted currency. */
function figures(draft: QuoteDraft, priced: PricedQuote) {
  const { priceStepMinor, rangeStepMinor } = draft.pricing;
  const fromMinor = quotedPrice(priced.workMinor, draft.currency, priceStepMinor);
  const likely = (costMinor: number) => ceilToStep(asPrice(draft, costMinor), priceStepMinor);
  const high = Math.max(
    ceilToStep(asPrice(draft, priced.cost.p95), rangeStepMinor),
    ceilToStep(fromMinor, rangeStepMinor),
  );
  return {
    fromMinor,
    rangeMinor: { low: floorToStep(fromMinor, rangeStepMinor), high },
    likelyMinor: { p50: likely(priced.cost.p50), p80: likely(priced.cost.p80), p95: likely(priced.cost.p95) },
  };
}

/** Runs the model on a changed request and gives the work price in the quoted currency. */
function repricer(request: EstimateRequest, card: RateCard): Reprice {
  return (change) => {
    const changed = { ...request, ...change };
    const subject = findSubject(changed, card);
    if (!subject.ok) return null;
    const draft = draftForRequest(changed, subject.value, card.rates);
    return quotedPrice(priceQuote(draft).workMinor, draft.currency, draft.pricing.priceStepMinor);
  };
}

function assemble(request: EstimateRequest, subject: Subject, card: RateCard, draft: QuoteDraft): Estimate {
  const { rates } = card;
  const priced = priceQuote(draft);
  const money = figures(draft, priced);
  const reprice = repricer(request, card);
  const [work, carriage] = priced.documentLines;
  const deposit = priced.stages[0];
  return {
    modelVersion: priced.modelVersion,
    ratesVersion: draft.ratesVersion,
    title: draft.title,
    currency: priced.quoted,
    pieces: draft.pieces,
    massesG: draft.massesG,
    massTolerance: draft.massTolerance,
    ...money,
    lines: customerLines(draft, priced, work?.netMinor ?? 0),
    bins: pricedBins(draft, priced.bins),
    assumptions: assumptionsOf(request, subject, draft, priced, rates),
    risks: risksOf(request, subject, draft, priced, rates),
    levers: cheaperLevers(request, subject, rates, money.fromMinor, reprice),
    alloys: alloyDifferences(subject, rates, money.fromMinor, reprice),
    stages: priced.stages,
    firstPaymentMinor: (draft.tax.shown === 'inclusive' ? deposit?.grossMinor : deposit?.netMinor) ?? 0,
    weeks: draft.dateRange,
    carriage: { minor: carriage?.netMinor ?? 0, words: draft.carriage.words },
    tax: { kind: draft.tax.kind, rate: draft.tax.rate },
    totals: priced.totals,
    pricesShown: draft.tax.shown,
  };
}

/**
 * The estimate for a request: the same function in the page and on the server, so that both agree to the minor unit.
 * Refuses a request that names something the studio does not offer, saying which field to change.
 */
export function estimate(request: EstimateRequest, card: RateCard): Outcome<Estimate> {
  const subject = findSubject(request, card);
  if (!subject.ok) return subject;
  return done(assemble(request, subject.value, card, draftForRequest(request, subject.value, card.rates)));
}

/** The draft the owner's desk starts from, with the range the buyer was shown. Internal lines: never send it to a buyer. */
export function draftFromEstimate(request: EstimateRequest, card: RateCard): Outcome<QuoteDraft> {
  const subject = findSubject(request, card);
  if (!subject.ok) return subject;
  const draft = draftForRequest(request, subject.value, card.rates);
  const priced = priceQuote(draft);
  const shownRange = { lowMinor: priced.rangeMinor.low, highMinor: priced.rangeMinor.high };
  return done({ ...draft, shownRange, validityDays: usualValidityDays(draft, priced) });
}
