import { eq } from 'drizzle-orm';
import type { BuyerTerms } from '../../commission/enquiry/buyer-terms';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { findCommission, lockCommission, type CommissionRow } from '../commissions';
import { commissions } from '../db/schema/commissions';
import { recordEvent } from '../history';
import { mayStillQuote } from '../quote/quote-desk';
import type { Services } from '../services';

/**
 * The owner's decision on an institution's credit: its purchase order, and in how many days it pays. The days count from
 * acceptance, so they stand once the quote is accepted; the order's number may come later.
 */
export async function setBuyerTerms(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: BuyerTerms,
): Promise<Outcome<BuyerTerms>> {
  const found = await findCommission(services, actor, ref, 'commission:triage');
  if (!found.ok) return found;
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    const barred = whyNot(commission, input);
    if (barred) return barred;
    const before = commission.buyer;
    if (before?.poNumber === input.poNumber && before?.netDays === input.netDays) return done(input);
    const { poNumber, netDays } = input;
    const buyer = {
      kind: 'institution' as const,
      ...(poNumber ? { poNumber } : {}),
      ...(netDays ? { netDays } : {}),
    };
    const at = services.now();
    await tx.update(commissions).set({ buyer, updatedAt: at }).where(eq(commissions.id, commission.id));
    await recordEvent(tx, {
      commissionId: commission.id,
      code: 'buyer-terms',
      actor,
      sentence: `The buyer’s terms: ${poNumber ? `purchase order ${poNumber}` : 'no purchase order'}, ${netDays ? `pays in ${netDays} days` : 'no credit'}.`,
      at,
      data: { poNumber: poNumber ?? null, netDays: netDays ?? null },
    });
    return done(input);
  });
}

function whyNot(commission: CommissionRow, input: BuyerTerms): Outcome<never> | null {
  if (commission.buyer?.kind !== 'institution')
    return refuse(
      'conflict',
      'Days of credit and a purchase order are for institutions; this buyer asked as a person.',
    );
  if (input.netDays === commission.buyer.netDays || mayStillQuote(commission.deal)) return null;
  const message = `The quote was accepted with ${commission.buyer.netDays ? `${commission.buyer.netDays} days of credit` : 'no credit'}; the first payment’s day stands. The order’s number can still be changed.`;
  return refuse('conflict', message, { netDays: message });
}
