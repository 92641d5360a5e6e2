import {
  chanceAbove,
  costFigures,
  distributionBins,
  expectedCost,
  listOutcomes,
  meanHandFactor,
} from './cost-distribution';
import { sumLines } from './cost-sums';
import { quotedCarriage, quotedPrice } from './currency';
import { pricesFor, shownRange } from './price';
import type { PricedQuote } from './pricing-results';
import type { QuoteDraft } from './quote-draft';
import { quoteWarnings } from './quote-warnings';
import { coveredFailures, expectedFailures, failureChances, meanSoundness, soundnessInterval } from './soundness';
import { planStages, stagePayments } from './stage-payments';
import { sumDocument, taxedLine, taxRate } from './tax';

/** Costs and prices of a draft, all in the studio's currency; the part of a quote that no buyer sees. */
function priceWork(draft: QuoteDraft) {
  const { pricing, soundness, hand, pieces } = draft;
  const sums = sumLines(draft);
  const chances = failureChances(pieces, soundness, pricing.listedFailures);
  const failures = expectedFailures(pieces, soundness);
  const outcomes = listOutcomes(sums, chances, hand, pricing.handWeights);
  const cost = costFigures(outcomes, expectedCost(sums, failures, meanHandFactor(hand, pricing.handWeights)));
  const prices = pricesFor(cost, pricing);
  return { sums, chances, failures, outcomes, cost, prices };
}

function chosenPrice(draft: QuoteDraft, prices: PricedQuote['prices']): number {
  if (draft.price.kind === 'own') return draft.price.workMinor;
  return draft.price.kind === 'p80' ? prices.p80Minor : prices.firmMinor;
}

/** What the buyer reads: work and carriage in the quoted currency, with tax line by line. */
function documentOf(draft: QuoteDraft, workMinor: number) {
  const rate = taxRate(draft.tax);
  const work = quotedPrice(workMinor, draft.currency, draft.pricing.priceStepMinor);
  const carriage = quotedCarriage(draft.carriage.minor, draft.currency);
  const lines = [
    taxedLine('work', draft.title, work, rate),
    taxedLine('carriage', draft.carriage.words, carriage, rate),
  ];
  return { lines, totals: sumDocument(lines), rate };
}

/**
 * Prices a draft: the one function behind the owner's desk, the frozen quote and the estimate. Pure; the same draft gives
 * the same result on every machine. Figures of cost are not rounded, prices are whole price steps, lines half-up.
 */
export function priceQuote(draft: QuoteDraft): PricedQuote {
  const { pricing, currency } = draft;
  const { sums, chances, failures, outcomes, cost, prices } = priceWork(draft);
  const workMinor = chosenPrice(draft, prices);
  const { lines, totals, rate } = documentOf(draft, workMinor);
  const covered = coveredFailures(chances, pricing.deposits.coverProbability);
  const plan = planStages(sums, workMinor, covered, pricing);
  const quoted = (minor: number) => quotedPrice(minor, currency, pricing.priceStepMinor);
  const priced = {
    modelVersion: pricing.modelVersion,
    studio: currency.studio,
    quoted: currency.quoted,
    sums,
    failureChances: chances,
    expectedFailures: failures,
    soundPour: { mean: meanSoundness(draft.soundness), ...soundnessInterval(draft.soundness, 0.9) },
    chanceOfRepour: 1 - (chances[0] ?? 1),
    cost,
    prices,
    workMinor,
    rangeMinor: shownRange(prices.firmMinor, cost, pricing),
    expectedMargin: (workMinor - cost.expected) / workMinor,
    chanceOfLoss: chanceAbove(outcomes, workMinor),
    bins: distributionBins(outcomes),
    stages: stagePayments(quoted(plan.depositMinor), quoted(plan.gateMinor), totals, rate),
    documentLines: lines,
    totals,
    exposure: {
      receivedMinor: plan.depositMinor + plan.gateMinor,
      committedMinor: plan.committedBeforeFettlingMinor,
      shortfallMinor: plan.shortfallMinor,
    },
    validityDays: draft.validityDays,
  };
  return { ...priced, warnings: quoteWarnings(draft, priced) };
}
