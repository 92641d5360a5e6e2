import { eq } from 'drizzle-orm';
import { isOpen } from '../../commission/deal';
import type { ParcelAddress } from '../../commission/parcel-address';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { findCommission, lockCommission } from '../commissions';
import { commissions } from '../db/schema/commissions';
import { recordEvent } from '../history';
import type { Services } from '../services';

/**
 * Keeps where the parcel goes, as the customer or an owner writes it. The country stays the one the quote
 * was priced for, since carriage, tax and rules hang on it; another one is a change to talk about.
 */
export async function setParcelAddress(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: ParcelAddress,
): Promise<Outcome<ParcelAddress>> {
  const found = await findCommission(services, actor, ref, 'commission:write-message');
  if (!found.ok) return found;
  const at = services.now();
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    if (!isOpen(commission.deal) || ['sent', 'delivered', 'lost'].includes(commission.deal)) {
      return refuse(
        'conflict',
        'The parcel has left, or this commission has ended, so its address cannot change here. Write us a message.',
      );
    }
    if (input.country !== commission.destination) {
      const sentence =
        'The price was worked out for another country. Write us a message, and we tell you what carriage and tax become.';
      return refuse('conflict', sentence, { country: sentence });
    }
    const before = commission.shipping;
    if (
      before &&
      JSON.stringify([before.lines, before.country, before.phone]) ===
        JSON.stringify([input.lines, input.country, input.phone])
    )
      return done(input);
    await tx.update(commissions).set({ shipping: input, updatedAt: at }).where(eq(commissions.id, commission.id));
    await recordEvent(tx, {
      commissionId: commission.id,
      code: 'address',
      actor,
      sentence: 'The address for the parcel was written down.',
      public: true,
      at,
    });
    return done(input);
  });
}
