import { eq, sql } from 'drizzle-orm';
import type Stripe from 'stripe';
import { z } from 'zod';
import { keepSession, moveSession } from './checkout-sessions';
import { lockCommission, type CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { commissions, tray } from '../db/schema/commissions';
import { checkoutSessions, stripeEvents } from '../db/schema/quotes';
import { moveDeal, recordEvent } from '../history';
import { bookEntry, callInStages, type LedgerEntry } from './ledger';
import { queueReceiptMail } from './payment-mails';
import { findMisfit, putInTray } from './payment-misfit';
import { openPieces } from '../making/pieces';
import { writePromise } from '../quote/promise';
import type { Services } from '../services';
import { askForSession } from '../stripe/provider';

/** What became of an event; kept beside its id. */
export type EventOutcome = 'booked' | 'pending' | 'expired' | 'failed' | 'known' | 'unmatched' | 'ignored';

type Session = Stripe.Checkout.Session;

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
  const objectId = (event.data.object as { id?: string }).id ?? '';
  const session = SESSION_EVENTS.has(event.type) ? await askForSession(services, objectId) : null;
  return services.db.transaction(async (tx) => {
    const claimed = await tx
      .insert(stripeEvents)
      .values({ id: event.id, type: event.type, objectId, outcome: 'ignored', receivedAt: services.now() })
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
  const session = await askForSession(services, sessionId);
  return services.db.transaction(async (tx) => {
    if (session) return applySession(services, tx, session);
    // A page the provider does not know can never be paid.
    return (await moveSession(tx, sessionId, 'expired')) ? 'expired' : 'ignored';
  });
}

async function applySession(services: Services, tx: Transaction, session: Session): Promise<EventOutcome> {
  const named = await findNamed(tx, session);
  if (!named) return session.payment_status === 'paid' ? layAside(services, tx, session) : 'ignored';
  const commission = await lockCommission(tx, named.commissionId);
  await keepSession(tx, session, { ...named, at: services.now() });
  if (session.payment_status === 'paid') return bookSession(services, tx, session, commission, named.stagePaymentId);
  if (session.status === 'complete') return settleDelayed(services, tx, session, commission);
  if (session.status !== 'expired') return 'ignored';
  await moveSession(tx, session.id, 'expired');
  return 'expired';
}

const metadataSchema = z.object({ commission: z.uuid(), stage: z.uuid() });

/** The commission and stage a session was made for: by our own row, else by what was written on it when it was made. */
async function findNamed(tx: Transaction, session: Session) {
  const [row] = await tx.select().from(checkoutSessions).where(eq(checkoutSessions.id, session.id));
  if (row) return { commissionId: row.commissionId, stagePaymentId: row.stagePaymentId };
  const written = metadataSchema.safeParse(session.metadata);
  if (!written.success) return null;
  const { commission, stage } = written.data;
  const [found] = await tx.select({ id: commissions.id }).from(commissions).where(eq(commissions.id, commission));
  return found ? { commissionId: commission, stagePaymentId: stage } : null;
}

/** Money on a session that names no commission of ours goes before the owner, once. */
async function layAside(services: Services, tx: Transaction, session: Session): Promise<EventOutcome> {
  await tx.execute(sql`select pg_advisory_xact_lock(hashtext(${session.id}))`);
  const items = await tx
    .select({ id: tray.id })
    .from(tray)
    .where(sql`${tray.data} ->> 'session' = ${session.id}`);
  if (items.length > 0) return 'known';
  const message =
    'Money came in on a payment page that names no commission of ours. Look it up at Stripe, then refund it or book it by hand.';
  const data = { session: session.id, amountMinor: session.amount_total, currency: session.currency?.toUpperCase() };
  await putInTray(tx, null, { code: 'conflict', message }, data, services.now());
  return 'unmatched';
}

async function settleDelayed(
  services: Services,
  tx: Transaction,
  session: Session,
  commission: CommissionRow,
): Promise<EventOutcome> {
  const intent = typeof session.payment_intent === 'object' ? session.payment_intent : null;
  const failed = intent?.status === 'requires_payment_method' || intent?.status === 'canceled';
  const changed = await moveSession(tx, session.id, failed ? 'failed' : 'pending');
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

async function bookSession(
  services: Services,
  tx: Transaction,
  session: Session,
  commission: CommissionRow,
  stageId: string,
): Promise<EventOutcome> {
  const intent = session.payment_intent;
  const amountMinor = session.amount_total ?? 0;
  const currency = (session.currency ?? '').toUpperCase();
  const at = services.now();
  const misfit = await findMisfit(tx, commission, { stageId, amountMinor, currency }, at);
  const entry = await bookEntry(tx, {
    commissionId: commission.id,
    stagePaymentId: misfit ? null : stageId,
    kind: 'received',
    amountMinor,
    currency,
    providerId: typeof intent === 'string' ? intent : (intent?.id ?? session.id),
    cause: { session: session.id, stage: stageId },
    at,
  });
  await moveSession(tx, session.id, 'paid');
  if (!entry) return 'known';
  if (misfit) {
    await putInTray(tx, commission.id, misfit, { session: session.id, amountMinor, currency, stage: stageId }, at);
    return 'unmatched';
  }
  await welcomePayment(services, tx, commission, entry);
  return 'booked';
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
  const booked = commission.deal === 'agreed' ? await bookDeal(tx, commission, at) : commission;
  await queueReceiptMail(services, tx, booked, entry);
}

/** T12. The row returned has the promise, and still the state it was in. */
async function bookDeal(tx: Transaction, commission: CommissionRow, at: Date): Promise<CommissionRow> {
  const moved = await moveDeal(tx, commission, {
    move: 'T12',
    mover: 'payment',
    actor: null,
    actorRole: 'payment',
    sentence: 'First stage payment received: the place in the year is booked.',
    public: true,
    at,
  });
  if (!moved.ok) throw new Error(`commission ${commission.ref} could not be booked: ${moved.problem.message}`);
  const routes = await openPieces(tx, commission.id, at);
  // Nobody will be asked at gate A when no piece passes it, so what was to fall due there falls due now.
  if (!routes.some((route) => route.includes('pattern'))) await callInStages(tx, commission.id, ['gate-a'], at);
  return writePromise(tx, commission, at);
}
