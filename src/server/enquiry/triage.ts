import { eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { canonicalJson } from '../../commission/canonical-json';
import { currencySchema, formatMoney, share } from '../../commission/money';
import type { Actor } from '../../commission/permissions';
import type { Estimate } from '../../commission/pricing/pricing-results';
import { done, type Outcome } from '../../commission/problem';
import { DECLINE_REASONS, type Decline, type OwnerEstimate, type SendEstimate } from '../../commission/enquiry/triage';
import { findCommission, lockCommission, type CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { moveDeal } from '../history';
import { queueMail } from '../outbox';
import { leavesBetween } from '../quote/promised-days';
import type { Services } from '../services';

/** Declines an enquiry with a reason the customer reads (T5). Pressed twice, it is declined once. */
export async function declineEnquiry(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: Decline,
): Promise<Outcome<{ ref: string }>> {
  const found = await findCommission(services, actor, ref, 'commission:triage');
  if (!found.ok) return found;
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    if (commission.deal === 'declined' && commission.declineReason === input.reason)
      return done({ ref: commission.ref });
    const at = services.now();
    const words = DECLINE_REASONS[input.reason];
    const moved = await moveDeal(tx, commission, {
      move: 'T5',
      mover: 'owner',
      actor,
      sentence: `The studio declined: ${words.name.toLowerCase()}.`,
      public: true,
      at,
      data: { reason: input.reason, note: input.note ?? null, form: commission.formSlug },
    });
    if (!moved.ok) return moved;
    await tx.update(commissions).set({ declineReason: input.reason }).where(eq(commissions.id, commission.id));
    await queueMail(tx, {
      letter: 'M5',
      to: commission.email,
      cause: `M5:${commission.id}`,
      commissionId: commission.id,
      at,
      data: {
        ref: commission.ref,
        title: commission.title,
        name: commission.customerName,
        reason: input.note ? `${words.reason} ${input.note}` : words.reason,
        couldChange: words.couldChange,
      },
    });
    return done({ ref: commission.ref });
  });
}

/** Sends the customer a range with what it rests on (T6). The very same range sent twice is sent once. */
export async function sendEstimate(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: SendEstimate,
): Promise<Outcome<{ ref: string }>> {
  const found = await findCommission(services, actor, ref, 'commission:triage');
  if (!found.ok) return found;
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    const at = services.now();
    const shown = commission.estimate as Estimate;
    const range: OwnerEstimate = {
      ...input,
      currency: commission.currency,
      sentAt: at.toISOString(),
      modelVersion: shown.modelVersion,
    };
    if (commission.deal === 'estimated' && isSame(commission.ownerEstimate as OwnerEstimate | null, range))
      return done({ ref: commission.ref });
    const moved = await moveDeal(tx, commission, {
      move: 'T6',
      mover: 'owner',
      actor,
      sentence: `The studio sent an estimate range: ${rangeWords(range)}. It is not an offer.`,
      public: true,
      at,
      data: { range, inputs: commission.estimateRequest as Record<string, unknown> },
    });
    if (!moved.ok) return moved;
    await tx.update(commissions).set({ ownerEstimate: range }).where(eq(commissions.id, commission.id));
    await queueEstimateMail(tx, commission, range, at);
    return done({ ref: commission.ref });
  });
}

function isSame(before: OwnerEstimate | null, now: OwnerEstimate): boolean {
  return before !== null && canonicalJson({ ...before, sentAt: '' }) === canonicalJson({ ...now, sentAt: '' });
}

function rangeWords({ lowMinor, highMinor, currency }: OwnerEstimate): string {
  const money = (minor: number) => formatMoney(minor, currencySchema.parse(currency), { pence: 'whole' });
  return `${money(lowMinor)} to ${money(highMinor)} before tax and carriage`;
}

/** M6: consumers read sums with tax, as they will pay them; institutions without. */
async function queueEstimateMail(
  tx: Transaction,
  commission: CommissionRow,
  range: OwnerEstimate,
  at: Date,
): Promise<void> {
  const currency = currencySchema.parse(range.currency);
  const { tax, pricesShown } = commission.estimate as Estimate;
  const rate = pricesShown === 'inclusive' && tax.kind === 'standard' ? tax.rate : 0;
  const sum = (minor: number) => ({ minor: minor + share(minor, rate), currency });
  await queueMail(tx, {
    letter: 'M6',
    to: commission.email,
    cause: `M6:${uuidv7()}`,
    commissionId: commission.id,
    at,
    data: {
      ref: commission.ref,
      title: commission.title,
      name: commission.customerName,
      low: sum(range.lowMinor),
      high: sum(range.highMinor),
      basis: rate > 0 ? `With ${Math.round(rate * 100)} % VAT, without carriage.` : 'Without tax and carriage.',
      drivers: range.drivers,
      assumptions: range.assumptions,
      leaves: leavesBetween(at, range),
      ...(range.note ? { note: range.note } : {}),
    },
  });
}
