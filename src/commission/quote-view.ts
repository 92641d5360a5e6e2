import type { DocumentLine, StagePayment } from './pricing/pricing-results';
import type { Currency } from './money';

/** When a stage payment falls due, in the customer's words. */
export const STAGE_WHEN: Record<StagePayment['id'], string> = {
  deposit: 'when you accept',
  'gate-a': 'when you approve the pattern or wax',
  balance: 'before it is sent to you',
};

/**
 * A quote revision as its customer reads it. Holds no cost line, margin, chance or figure of the studio's own; all
 * money is in `currency`, minor units.
 */
export interface CustomerQuote {
  revision: number;
  state: 'sent' | 'withdrawn' | 'accepted' | 'lapsed';
  /** True when it can be accepted now. */
  open: boolean;
  sentAt: Date;
  validUntil: Date;
  sha256: string;
  title: string;
  pieces: number;
  specification: string[];
  metal: string;
  mass: { grams: number; toleranceG: number };
  currency: Currency;
  lines: DocumentLine[];
  totals: { netMinor: number; taxMinor: number; grossMinor: number };
  tax: { kind: 'standard' | 'export'; rate: number; shown: 'inclusive' | 'exclusive' };
  stages: (StagePayment & { when: string })[];
  includedRounds: number;
  weeks: { earliestWeeks: number; latestWeeks: number };
  mark: string;
  outOfRangeReason: string | null;
  terms: { version: string; sha256: string };
  customer: { name: string; country: string };
  studio: { name: string; place: string; vatNumber?: string };
}
