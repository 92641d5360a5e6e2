import { and, eq, inArray, lte, sql } from 'drizzle-orm';
import { DEPOSIT_LAPSES_AFTER_DAYS, depositHeldUntil, depositStanding, quoteHasLapsed } from '../../commission/clock';
import { currencySchema } from '../../commission/money';
import { lockCommission, type CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { checkoutSessions, quotes, stagePayments } from '../db/schema/quotes';
import { mails } from '../db/schema/studio';
import { moveDeal } from '../history';
import { localDay } from '../mail/letter-words';
import { readStudioFacts } from '../mail/studio-facts';
import { queueJob, queueMail } from '../outbox';
import { standingAcceptance } from '../quote/standing-acceptance';
import type { Services } from '../services';

/**
 * T9: lapses every quote whose validity has passed and for which no payment is on its way. Each in a
 * transaction of its own, so that one that cannot be lapsed does not hold up the others. Returns how many lapsed.
 */
export async function lapseQuotes(services: Services): Promise<number> {
  const due = await services.db
    .select({ id: quotes.id, commissionId: quotes.commissionId })
    .from(quotes)
    .innerJoin(commissions, eq(commissions.id, quotes.commissionId))
    .where(and(eq(quotes.state, 'sent'), eq(commissions.deal, 'quoted'), lte(quotes.validUntil, services.now())));
  return countDone(services, due, (tx, { id, commissionId }) => lapseQuote(services, tx, id, commissionId));
}

async function lapseQuote(services: Services, tx: Transaction, id: string, commissionId: string): Promise<boolean> {
  const at = services.now();
  const commission = await lockCommission(tx, commissionId);
  const [quote] = await tx.select().from(quotes).where(eq(quotes.id, id));
  const paymentPending = await hasPendingPayment(tx, commissionId);
  if (quote?.state !== 'sent' || !quoteHasLapsed({ validUntil: quote.validUntil, paymentPending }, at)) return false;
  const moved = await moveDeal(tx, commission, {
    move: 'T9',
    mover: 'clock',
    actor: null,
    actorRole: 'clock',
    sentence: `Quote revision ${quote.revision} lapsed: its validity ended without an acceptance. Nothing is owed.`,
    public: true,
    data: { quoteId: id, revision: quote.revision },
    at,
  });
  if (!moved.ok) return false;
  await tx.update(quotes).set({ state: 'lapsed', closedAt: at }).where(eq(quotes.id, id));
  return true;
}

/**
 * First payments that have not come: M13 after four days, T13 after seven, neither while a payment is on its
 * way or the studio gave credit. Returns how many were reminded or lapsed.
 */
export async function lapseDeposits(services: Services): Promise<number> {
  const agreed = await services.db
    .select({ commissionId: commissions.id })
    .from(commissions)
    .where(eq(commissions.deal, 'agreed'));
  return countDone(services, agreed, (tx, { commissionId }) => lookAtDeposit(services, tx, commissionId));
}

async function lookAtDeposit(services: Services, tx: Transaction, commissionId: string): Promise<boolean> {
  const at = services.now();
  const commission = await lockCommission(tx, commissionId);
  const acceptance = await standingAcceptance(tx, commissionId);
  if (commission.deal !== 'agreed' || !acceptance) return false;
  const cause = `M13:${acceptance.quoteId}`;
  const [reminder] = await tx.select({ createdAt: mails.createdAt }).from(mails).where(eq(mails.cause, cause));
  const standing = depositStanding(
    {
      acceptedAt: acceptance.acceptedAt,
      remindedAt: reminder?.createdAt ?? null,
      paymentPending: await hasPendingPayment(tx, commissionId),
      onCredit: commission.buyer?.kind === 'institution' && (commission.buyer.netDays ?? 0) > 0,
    },
    at,
  );
  if (standing === 'remind') return remindOfDeposit(services, tx, commission, acceptance);
  if (standing === 'lapse') return lapseAgreement(services, tx, commission, acceptance.quoteId);
  return false;
}

async function remindOfDeposit(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  { quoteId, acceptedAt }: { quoteId: string; acceptedAt: Date },
): Promise<boolean> {
  const at = services.now();
  const [first] = await tx
    .select()
    .from(stagePayments)
    .where(eq(stagePayments.quoteId, quoteId))
    .orderBy(stagePayments.position)
    .limit(1);
  if (!first) return false;
  const { timeZone } = await readStudioFacts(tx);
  const queued = await queueMail(tx, {
    letter: 'M13',
    to: commission.email,
    cause: `M13:${quoteId}`,
    commissionId: commission.id,
    at,
    data: {
      ref: commission.ref,
      title: commission.title,
      name: commission.customerName,
      amount: { minor: first.grossMinor, currency: currencySchema.parse(first.currency) },
      heldUntil: localDay(depositHeldUntil(acceptedAt, at), timeZone),
    },
  });
  return queued !== null;
}

async function lapseAgreement(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  quoteId: string,
): Promise<boolean> {
  const at = services.now();
  const moved = await moveDeal(tx, commission, {
    move: 'T13',
    mover: 'clock',
    actor: null,
    actorRole: 'clock',
    sentence: `The first payment was not seen within ${DEPOSIT_LAPSES_AFTER_DAYS} days, so the place was given up. Nothing is owed.`,
    public: true,
    data: { quoteId },
    at,
  });
  if (!moved.ok) return false;
  await tx.update(quotes).set({ state: 'lapsed', closedAt: at }).where(eq(quotes.id, quoteId));
  return true;
}

async function hasPendingPayment(tx: Transaction, commissionId: string): Promise<boolean> {
  const [pending] = await tx
    .select({ id: checkoutSessions.id })
    .from(checkoutSessions)
    .where(and(eq(checkoutSessions.commissionId, commissionId), eq(checkoutSessions.state, 'pending')))
    .limit(1);
  return pending !== undefined;
}

/** Queues a send for every waiting mail that has none, such as after its job was given up. Returns how many. */
export async function requeueMails(services: Services): Promise<number> {
  const waiting = await services.db
    .select({ id: mails.id, notBefore: mails.notBefore })
    .from(mails)
    .where(
      and(
        inArray(mails.state, ['queued']),
        sql`not exists (select from graphile_worker.jobs as job where job.key = 'mail:' || ${mails.id} and job.attempts < job.max_attempts)`,
      ),
    );
  for (const { id, notBefore } of waiting) {
    await queueJob(services.db, 'send-mail', { mailId: id }, `mail:${id}`, notBefore);
  }
  return waiting.length;
}

async function countDone<T extends { commissionId: string }>(
  { db, log }: Services,
  rows: T[],
  work: (tx: Transaction, row: T) => Promise<boolean>,
): Promise<number> {
  let done = 0;
  const failures: unknown[] = [];
  for (const row of rows) {
    try {
      if (await db.transaction((tx) => work(tx, row))) done += 1;
    } catch (error) {
      log.error({ err: error, commissionId: row.commissionId }, 'the clock could not look at this commission');
      failures.push(error);
    }
  }
  if (failures.length > 0) throw new AggregateError(failures, `${failures.length} commissions could not be looked at`);
  return done;
}
