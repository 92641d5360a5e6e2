import type { Currency } from '../money';
import type { WeekRange } from './quote-draft';

/** Sums of the cost lines, minor units. O, A, m, H, S, d and lambda of the model in docstrings elsewhere. */
export interface CostSums {
  pieces: number;
  /** One-off lines before and after gate A. */
  beforeGate: number;
  afterGate: number;
  /** One attempt, one poured mould. */
  attempt: number;
  /** Metal in one sound piece. */
  metal: number;
  /** Hand work on all pieces. */
  hand: number;
  sundries: number;
  /** What a scrapped casting loses in value when it goes back to the returns. */
  downgrade: number;
  /** Hand cost lost per failure, expected: late share x half the fettling. Not rounded. */
  lostHand: number;
  /** Metal bought for the first pour of every piece. */
  boughtMetal: number;
  /** Rush: what unshared heats add once, and at each re-pour; overtime as a share of hand cost. Zero without rush. */
  rushOnce: number;
  rushPerRepour: number;
  overtimeShare: number;
}

/** One column of a chart: chance that the cost falls in [fromMinor, toMinor). */
export interface Bin {
  fromMinor: number;
  toMinor: number;
  probability: number;
}

/** Costs in minor units, not rounded. */
export interface CostFigures {
  expected: number;
  p50: number;
  p80: number;
  p95: number;
}

export interface StagePayment {
  id: 'deposit' | 'gate-a' | 'balance';
  label: string;
  /** Quoted currency, minor units. gross = net + tax. */
  netMinor: number;
  taxMinor: number;
  grossMinor: number;
}

export interface DocumentLine {
  id: 'work' | 'carriage';
  label: string;
  netMinor: number;
  taxMinor: number;
  grossMinor: number;
}

export interface Warning {
  code: string;
  message: string;
  /** The quote cannot be sent before this is dealt with. */
  blocking: boolean;
}

/** A priced quote. Money in `studio` currency unless said; stages, documentLines and totals in the `quoted` one. */
export interface PricedQuote {
  modelVersion: string;
  studio: Currency;
  quoted: Currency;
  sums: CostSums;
  /** P(F = k) for k = 0, 1, ... and the lumped tail last. */
  failureChances: number[];
  expectedFailures: number;
  /** Chance that one pour is sound: the mean of the belief and its middle 90 %. */
  soundPour: { mean: number; low: number; high: number };
  chanceOfRepour: number;
  cost: CostFigures;
  prices: { expectedMinor: number; breakEvenP80Minor: number; firmMinor: number; p80Minor: number; p95Minor: number };
  /** The price asked for the work, no carriage, no tax. */
  workMinor: number;
  rangeMinor: { low: number; high: number };
  /** Share of price, may be negative. */
  expectedMargin: number;
  chanceOfLoss: number;
  bins: Bin[];
  stages: StagePayment[];
  documentLines: DocumentLine[];
  totals: { netMinor: number; taxMinor: number; grossMinor: number };
  /** Before fettling starts: what has come in, what is committed at four in five, what is missing. Studio's currency. */
  exposure: { receivedMinor: number; committedMinor: number; shortfallMinor: number };
  validityDays: number;
  warnings: Warning[];
}

/** A line a customer sees; the amounts of all lines sum to the work price shown. */
export interface CustomerLine {
  id: string;
  label: string;
  detail: string;
  amountMinor: number;
  repeatsAtRepour: boolean;
}

/** A change that would alter the price, with the difference in the quoted currency (negative is cheaper). */
export interface Lever {
  id: string;
  label: string;
  differenceMinor: number;
  /** The request fields to set to try it. */
  change: Record<string, string | number | boolean>;
}

/** What the estimate page shows. All money in `currency` (the one asked for), minor units, without tax unless said. */
export interface Estimate {
  modelVersion: string;
  ratesVersion: string;
  title: string;
  currency: Currency;
  pieces: number;
  massesG: { finished: number; cast: number; poured: number };
  massTolerance: number;
  /** The range to show, floor and ceiling to whole tens; `fromMinor` is the reckoned firm price. */
  rangeMinor: { low: number; high: number };
  fromMinor: number;
  lines: CustomerLine[];
  /** Chart of what pieces like this come to as a price (cost distribution over 1 - margin). */
  bins: Bin[];
  /** Prices that half, four in five and nineteen in twenty such pieces would come to. */
  likelyMinor: { p50: number; p80: number; p95: number };
  assumptions: string[];
  risks: string[];
  levers: Lever[];
  /** What each alloy offered would change, the chosen one left out. */
  alloys: { code: string; name: string; differenceMinor: number }[];
  stages: StagePayment[];
  /** The first payment, tax included when `pricesShown` is inclusive. */
  firstPaymentMinor: number;
  weeks: WeekRange;
  carriage: { minor: number; words: string };
  tax: { kind: 'standard' | 'export'; rate: number };
  totals: { netMinor: number; taxMinor: number; grossMinor: number };
  pricesShown: 'inclusive' | 'exclusive';
}
