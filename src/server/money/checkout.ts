import { desc, eq } from 'drizzle-orm';
import Stripe from 'stripe';
import { z } from 'zod';
import { ENDED_STATES } from '../../commission/deal';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import type { StageBalance } from '../../commission/balance';
import { keepSession, type CheckoutRow } from './checkout-sessions';
import { findCommission, type CommissionRow } from '../commissions';
import { checkoutSessions } from '../db/schema/quotes';
import { acceptedStages, readBalance, type StagePayment } from './ledger';
import { reconcileSession } from './payments';
import type { Services } from '../services';
import { createOnce, isAway, payLater } from '../stripe/provider';

/** What the pay button sends: which agreed stage. */
export const paySchema = z.object({ stage: z.uuid('Choose which stage payment to pay.') });

/** A page that ends sooner than this is not handed out again. */
const REUSE_MARGIN_MS = 5 * 60_000;

/** A Checkout page made for exactly what is owed at this moment. */
export interface CheckoutPage {
  url: string;
  sessionId: string;
  amountMinor: number;
}

/** What is owed on a stage, and the pages made for it so far, read at one instant; the newest page first. */
interface Standing {
  stage: StagePayment;
  balance: StageBalance;
  pages: CheckoutRow[];
}

/**
 * Makes a Checkout page for one due stage of the actor's own commission, at the click and for what is
 * owed now. A second click on the same stage gets the page already open. Nothing is booked here.
 */
export async function startCheckout(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: z.output<typeof paySchema>,
): Promise<Outcome<CheckoutPage>> {
  const found = await findCommission(services, actor, ref, 'payment:pay');
  if (!found.ok) return found;
  const commission = found.value;
  if (ENDED_STATES.has(commission.deal))
    return refuse(
      'conflict',
      `This commission is ${commission.deal}, so nothing is owed on it. Write to us to take it up.`,
    );
  const standing = await readStanding(services, commission.id, input.stage);
  if (!standing)
    return refuse(
      'not-found',
      'This payment belongs to a quote that is no longer in force. Open the commission to see what is due.',
    );
  const barred = whyNotPay(standing.balance);
  if (barred) return barred;
  try {
    return await openPage(services, commission, standing);
  } catch (error) {
    if (!isAway(error)) throw error;
    services.log.warn({ err: error, ref: commission.ref }, 'no payment page could be made');
    return payLater();
  }
}

async function readStanding({ db, now }: Services, commissionId: string, stageId: string): Promise<Standing | null> {
  return db.transaction(
    async (tx) => {
      const stage = (await acceptedStages(tx, commissionId)).find((each) => each.id === stageId);
      const balance = (await readBalance(tx, commissionId, now())).stages.find((each) => each.id === stageId);
      const pages = await tx
        .select()
        .from(checkoutSessions)
        .where(eq(checkoutSessions.stagePaymentId, stageId))
        .orderBy(desc(checkoutSessions.createdAt), desc(checkoutSessions.id));
      return stage && balance ? { stage, balance, pages } : null;
    },
    { isolationLevel: 'repeatable read', accessMode: 'read only' },
  );
}

function whyNotPay(balance: StageBalance): Outcome<never> | null {
  if (balance.state === 'paid') return refuse('conflict', 'This stage is paid already. Nothing more is owed on it.');
  if (balance.state === 'on-its-way')
    return refuse(
      'conflict',
      'A payment for this stage is on its way. Bank payments can take some days; please do not pay twice.',
    );
  if (balance.state === 'later') return refuse('conflict', 'This stage is not due yet. We write to you when it is.');
  return null;
}

async function openPage(
  services: Services,
  commission: CommissionRow,
  { stage, balance, pages }: Standing,
): Promise<Outcome<CheckoutPage>> {
  const open = pages.filter((page) => page.state === 'open');
  const good = open.find((page) => page.amountMinor === balance.owedMinor && lastsFrom(services, page.expiresAt));
  if (good) return done({ url: good.url, sessionId: good.id, amountMinor: good.amountMinor });
  for (const page of open) {
    if (!(await endPage(services, page.id)))
      return refuse('conflict', 'A payment for this stage has just been made. Reload the page to see where it stands.');
  }
  // Parallel clicks saw the same pages and so share one key: the provider makes one page of them.
  const made = await createPage(services, commission, stage, balance.owedMinor, pages.length);
  if (lastsFrom(services, made.expiresAt)) return done(made.page);
  // The provider gave us a page back that it made long ago and we never heard of; it ends too soon to be of use.
  await endPage(services, made.page.sessionId);
  return done((await createPage(services, commission, stage, balance.owedMinor, pages.length + 1)).page);
}

function lastsFrom(services: Services, expiresAt: Date): boolean {
  return expiresAt.getTime() > services.now().getTime() + REUSE_MARGIN_MS;
}

/** Ends an open page, so that no stage has two. False when it was paid, or a payment is on its way, before it could end. */
async function endPage(services: Services, sessionId: string): Promise<boolean> {
  try {
    await services.stripe.checkout.sessions.expire(sessionId);
  } catch (error) {
    // It ended before we asked: what it ended as is asked next.
    if (!(error instanceof Stripe.errors.StripeInvalidRequestError)) throw error;
  }
  const outcome = await reconcileSession(services, sessionId);
  return outcome === 'expired' || outcome === 'ignored';
}

async function createPage(
  services: Services,
  commission: CommissionRow,
  stage: StagePayment,
  owedMinor: number,
  before: number,
): Promise<{ page: CheckoutPage; expiresAt: Date }> {
  const params = pageParams(services, commission, stage, owedMinor);
  const session = await createOnce(`checkout:${stage.id}:${owedMinor}:${before}`, (idempotencyKey) =>
    services.stripe.checkout.sessions.create(params, { idempotencyKey }),
  );
  if (!session.url) throw new Error(`the provider made session ${session.id} without a page`);
  const facts = { commissionId: commission.id, stagePaymentId: stage.id, at: services.now() };
  await keepSession(services.db, session, facts);
  return {
    page: { url: session.url, sessionId: session.id, amountMinor: owedMinor },
    expiresAt: new Date(session.expires_at * 1000),
  };
}

function pageParams(
  { config }: Services,
  commission: CommissionRow,
  stage: StagePayment,
  owedMinor: number,
): Stripe.Checkout.SessionCreateParams {
  const metadata = { commission: commission.id, ref: commission.ref, stage: stage.id, quote: stage.quoteId };
  const page = `${config.publicUrl}/commissions/${commission.ref}`;
  return {
    mode: 'payment',
    customer_email: commission.email,
    client_reference_id: commission.ref,
    line_items: [
      {
        quantity: 1,
        price_data: {
          currency: stage.currency.toLowerCase(),
          unit_amount: owedMinor,
          product_data: { name: `${commission.ref}, ${commission.title}: ${stage.label}` },
        },
      },
    ],
    metadata,
    payment_intent_data: { metadata },
    success_url: `${page}/pay/return?session={CHECKOUT_SESSION_ID}`,
    cancel_url: `${page}#money`,
  };
}
