import { and, eq } from 'drizzle-orm';
import type Stripe from 'stripe';
import { uuidv7 } from 'uuidv7';
import type { Problem } from '../commission/problem';
import { lockCommission, type CommissionRow } from './commissions';
import type { Transaction } from './db/client';
import { tray } from './db/schema/commissions';
import { checkoutSessions, quotes, stagePayments, stripeEvents } from './db/schema/quotes';
import { moveDeal, recordEvent } from './history';
import { bookEntry, readBalance, type LedgerEntry } from './ledger';
import { queueReceiptMail } from './payment-mails';
import { openPieces } from './pieces';
import { writePromise } from './promise';
import type { Services } from './services';

/** What became of an event; kept beside its id. */
export type EventOutcome = 'booked' | 'pending' | 'expired' | 'failed' | 'known' | 'unmatched' | 'ignored';

const SESSION_EVENTS = new Set([
  'checkout.session.completed',
  'checkout.session.async_payment_succeeded',
  'checkout.session.async_payment_failed',
  'checkout.session.expired',
]);

/**
 * Takes in one webhook event. It is trusted only for the id of its session: what is true now is asked
 * from the provider. The event's row, the ledger line, the deal's move and the mails are one
 * transaction, so the same event any number of times books once.
 *
 * @throws when the provider or the database cannot be reached; the provider then sends the event again
 */
export async function recordStripeEvent(services: Services, event: Stripe.Event): Promise<EventOutcome> {
  const [known] = await services.db.select().from(stripeEvents).where(eq(stripeEvents.id, event.id));
  if (known) return 'known';
  const object = event.data.object as { id?: string };
  const session =
    SESSION_EVENTS.has(event.type) && object.id
      ? await services.stripe.checkout.sessions.retrieve(object.id, { expand: ['payment_intent.latest_charge'] })
      : null;
  return services.db.transaction(async (tx) => {
    const claimed = await tx
      .insert(stripeEvents)
      .values({
        id: event.id,
        type: event.type,
        objectId: object.id ?? '',
        outcome: 'ignored',
        receivedAt: services.now(),
      })
      .onConflictDoNothing()
      .returning({ id: stripeEvents.id });
    if (claimed.length === 0) return 'known';
    const outcome = session ? await applySession(services, tx, session) : 'ignored';
    await tx.update(stripeEvents).set({ outcome }).where(eq(stripeEvents.id, event.id));
    return outcome;
  });
}

/** Asks the provider about one session and takes in what it says; used when a webhook may be lost. */
export async function reconcileSession(services: Services, sessionId: string): Promise<EventOutcome> {
  const session = await services.stripe.checkout.sessions.retrieve(sessionId, {
    expand: ['payment_intent.latest_charge'],
  });
  return services.db.transaction((tx) => applySession(services, tx, session));
}

async function applySession(
  services: Services,
  tx: Transaction,
  session: Stripe.Checkout.Session,
): Promise<EventOutcome> {
  const [row] = await tx.select().from(checkoutSessions).where(eq(checkoutSessions.id, session.id));
  const commissionId = row?.commissionId ?? session.metadata?.['commission'];
  const stageId = row?.stagePaymentId ?? session.metadata?.['stage'];
  if (!commissionId || !stageId) return 'ignored';
  const commission = await lockCommission(tx, commissionId);
  await keepSession(services, tx, session, commission.id, stageId);
  if (session.payment_status === 'paid') return bookSession(services, tx, session, commission, stageId);
  if (session.status === 'complete') return settleDelayed(services, tx, session, commission);
  if (session.status === 'expired') {
    await setState(tx, session.id, 'expired');
    return 'expired';
  }
  return 'ignored';
}

async function keepSession(
  services: Services,
  tx: Transaction,
  session: Stripe.Checkout.Session,
  commissionId: string,
  stageId: string,
) {
  const [stage] = await tx.select().from(stagePayments).where(eq(stagePayments.id, stageId));
  if (!stage) return;
  await tx
    .insert(checkoutSessions)
    .values({
      id: session.id,
      commissionId,
      stagePaymentId: stageId,
      quoteId: stage.quoteId,
      amountMinor: session.amount_total ?? 0,
      currency: (session.currency ?? '').toUpperCase(),
      url: session.url ?? '',
      createdAt: services.now(),
      expiresAt: new Date(session.expires_at * 1000),
    })
    .onConflictDoNothing();
}

async function settleDelayed(
  services: Services,
  tx: Transaction,
  session: Stripe.Checkout.Session,
  commission: CommissionRow,
): Promise<EventOutcome> {
  const intent = typeof session.payment_intent === 'object' ? session.payment_intent : null;
  const failed = intent?.status === 'requires_payment_method' || intent?.status === 'canceled';
  const changed = await setState(tx, session.id, failed ? 'failed' : 'pending');
  if (changed) {
    await recordEvent(tx, {
      commissionId: commission.id,
      code: failed ? 'payment-failed' : 'payment-pending',
      actor: null,
      actorRole: 'payment',
      sentence: failed ? 'A bank payment did not arrive. The stage is due again.' : 'A bank payment is on its way.',
      public: true,
      at: services.now(),
    });
  }
  return failed ? 'failed' : 'pending';
}

async function setState(tx: Transaction, sessionId: string, state: string): Promise<boolean> {
  const [row] = await tx
    .select({ state: checkoutSessions.state })
    .from(checkoutSessions)
    .where(eq(checkoutSessions.id, sessionId));
  if (!row || row.state === state || row.state === 'paid') return false;
  await tx.update(checkoutSessions).set({ state }).where(eq(checkoutSessions.id, sessionId));
  return true;
}

async function bookSession(
  services: Services,
  tx: Transaction,
  session: Stripe.Checkout.Session,
  commission: CommissionRow,
  stageId: string,
): Promise<EventOutcome> {
  const intent = session.payment_intent;
  const providerId = typeof intent === 'string' ? intent : (intent?.id ?? session.id);
  const amountMinor = session.amount_total ?? 0;
  const currency = (session.currency ?? '').toUpperCase();
  const misfit = await findMisfit(services, tx, commission, stageId, amountMinor, currency);
  const entry = await bookEntry(tx, {
    commissionId: commission.id,
    stagePaymentId: misfit ? null : stageId,
    kind: 'received',
    amountMinor,
    currency,
    providerId,
    cause: { session: session.id, stage: stageId },
    at: services.now(),
  });
  await setState(tx, session.id, 'paid');
  if (!entry) return 'known';
  if (misfit) {
    await putInTray(services, tx, commission.id, misfit, {
      session: session.id,
      amountMinor,
      currency,
      stage: stageId,
    });
    return 'unmatched';
  }
  await welcomePayment(services, tx, commission, entry);
  return 'booked';
}

async function findMisfit(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  stageId: string,
  amountMinor: number,
  currency: string,
): Promise<Problem | null> {
  const [row] = await tx
    .select({ state: quotes.state, revision: quotes.revision })
    .from(stagePayments)
    .innerJoin(quotes, eq(quotes.id, stagePayments.quoteId))
    .where(and(eq(stagePayments.id, stageId), eq(stagePayments.commissionId, commission.id)));
  if (!row)
    return {
      code: 'conflict',
      message:
        'Money came in for a stage this commission does not have. Find out from the payer what it is for, or refund it.',
    };
  if (row.state !== 'accepted') {
    return {
      code: 'stale',
      message: `Money came in for revision ${row.revision}, which is no longer in force. Refund it, or ask the customer to accept the current quote.`,
    };
  }
  const stage = (await readBalance(tx, commission.id, services.now())).stages.find((each) => each.id === stageId)!;
  if (stage.currency !== currency || stage.owedMinor !== amountMinor) {
    return {
      code: 'conflict',
      message: `A payment of another amount or currency came in than the ${stage.label.toLowerCase()} owed. Compare both and refund or ask; nothing was guessed.`,
    };
  }
  return null;
}

async function putInTray(
  services: Services,
  tx: Transaction,
  commissionId: string,
  problem: Problem,
  data: Record<string, unknown>,
) {
  const at = services.now();
  await tx.insert(tray).values({ id: uuidv7(), commissionId, problem, data, createdAt: at });
  await recordEvent(tx, {
    commissionId,
    code: 'payment-unmatched',
    actor: null,
    actorRole: 'payment',
    sentence: problem.message,
    at,
    data,
  });
}

/** After a stage is booked: history, the deal's move when it was the first stage (T12), and M12. */
export async function welcomePayment(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  entry: LedgerEntry,
): Promise<void> {
  const at = services.now();
  await recordEvent(tx, {
    commissionId: commission.id,
    code: 'payment-received',
    actor: null,
    actorRole: 'payment',
    sentence: 'A stage payment was received.',
    public: true,
    at,
    data: { entry: entry.id, stage: entry.stagePaymentId },
  });
  if (commission.deal === 'agreed') {
    await moveDeal(tx, commission, {
      move: 'T12',
      mover: 'payment',
      actor: null,
      actorRole: 'payment',
      sentence: 'First stage payment received: the place in the year is booked.',
      public: true,
      at,
    });
    await openPieces(tx, commission.id, at);
  }
  const promised = commission.deal === 'agreed' ? await writePromise(tx, commission, at) : commission;
  await queueReceiptMail(services, tx, promised, entry);
}
