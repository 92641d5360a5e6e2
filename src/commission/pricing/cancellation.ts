import { share } from '../money';

/** What a cancellation is settled from; net amounts in minor units of the paid currency. */
export interface CancellationFacts {
  cancelledBy: 'customer' | 'studio';
  paidNetMinor: number;
  taxRate: number;
  /** Logged cost so far, and what of it the studio can use again (bought metal goes back to stock). */
  costToDateMinor: number;
  reusableMinor: number;
  /** Margin the terms allow to keep; nothing by default. */
  marginKeptMinor?: number;
}

/** Retained and refunded, each net, tax and gross; together they are exactly what was paid. */
export interface CancellationStatement {
  retained: { netMinor: number; taxMinor: number; grossMinor: number };
  refund: { netMinor: number; taxMinor: number; grossMinor: number };
}

/**
 * Retained = the smaller of what was paid and the logged cost less what can be used again, plus any declared margin;
 * a cancellation by the studio retains nothing. The refund's tax is half-up on the credit note.
 */
export function cancellationStatement(facts: CancellationFacts): CancellationStatement {
  const cost = Math.max(0, facts.costToDateMinor - facts.reusableMinor) + (facts.marginKeptMinor ?? 0);
  const retainedNet = facts.cancelledBy === 'studio' ? 0 : Math.min(facts.paidNetMinor, cost);
  const refundNet = facts.paidNetMinor - retainedNet;
  const refundTax = share(refundNet, facts.taxRate);
  const retainedTax = share(facts.paidNetMinor, facts.taxRate) - refundTax;
  return {
    retained: { netMinor: retainedNet, taxMinor: retainedTax, grossMinor: retainedNet + retainedTax },
    refund: { netMinor: refundNet, taxMinor: refundTax, grossMinor: refundNet + refundTax },
  };
}
