import { and, count, desc, eq, gt } from 'drizzle-orm';
import { z } from 'zod';
import type { Actor } from '../commission/permissions';
import { done, refuse, type Outcome } from '../commission/problem';
import { findCommission, type CommissionRow } from './commissions';
import { checkoutSessions } from './db/schema/quotes';
import { acceptedStages, readBalance } from './ledger';
import type { Services } from './services';

/** What the pay button sends: which agreed stage. */
export const paySchema = z.object({ stage: z.uuid('Choose which stage payment to pay.') });

const REUSE_MARGIN_MS = 5 * 60_000;
const SESSION_LIFE_MS = 60 * 60_000;

/** A Checkout page made for exactly what is owed at this moment. */
export interface CheckoutPage {
  url: string;
  sessionId: string;
  amountMinor: number;
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
  const now = services.now();
  const stages = await acceptedStages(services.db, commission.id);
  const stage = stages.find((each) => each.id === input.stage);
  if (!stage)
    return refuse(
      'not-found',
      'This payment belongs to a quote that is no longer in force. Open the commission to see what is due.',
    );
  const balance = (await readBalance(services.db, commission.id, now)).stages.find((each) => each.id === stage.id)!;
  if (balance.state === 'paid') return refuse('conflict', 'This stage is paid already. Nothing more is owed on it.');
  if (balance.state === 'on-its-way')
    return refuse(
      'conflict',
      'A payment for this stage is on its way. Bank payments can take some days; please do not pay twice.',
    );
  if (balance.state === 'later') return refuse('conflict', 'This stage is not due yet. We write to you when it is.');

  const open = await openSession(services, stage.id, balance.owedMinor);
  if (open) return done(open);
  const made = await createSession(services, commission, stage, balance.owedMinor);
  return done(made);
}

async function openSession(services: Services, stageId: string, owedMinor: number): Promise<CheckoutPage | null> {
  const after = new Date(services.now().getTime() + REUSE_MARGIN_MS);
  const [row] = await services.db
    .select()
    .from(checkoutSessions)
    .where(
      and(
        eq(checkoutSessions.stagePaymentId, stageId),
        eq(checkoutSessions.state, 'open'),
        eq(checkoutSessions.amountMinor, owedMinor),
        gt(checkoutSessions.expiresAt, after),
      ),
    )
    .orderBy(desc(checkoutSessions.createdAt))
    .limit(1);
  return row ? { url: row.url, sessionId: row.id, amountMinor: row.amountMinor } : null;
}

async function createSession(
  services: Services,
  commission: CommissionRow,
  stage: { id: string; quoteId: string; label: string; currency: string },
  owedMinor: number,
): Promise<CheckoutPage> {
  const { stripe, config, db } = services;
  const now = services.now();
  const expiresAt = new Date(now.getTime() + SESSION_LIFE_MS);
  const metadata = { commission: commission.id, ref: commission.ref, stage: stage.id, quote: stage.quoteId };
  const [before] = await db
    .select({ n: count() })
    .from(checkoutSessions)
    .where(eq(checkoutSessions.stagePaymentId, stage.id));
  const page = `${config.publicUrl}/commissions/${commission.ref}`;
  const session = await stripe.checkout.sessions.create(
    {
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
    },
    // Parallel clicks see the same count and so share one key: the provider makes one page of them.
    { idempotencyKey: `checkout:${stage.id}:${owedMinor}:${before?.n ?? 0}` },
  );
  const url = session.url;
  if (!url) throw new Error(`the provider made session ${session.id} without a page`);
  await db
    .insert(checkoutSessions)
    .values({
      id: session.id,
      commissionId: commission.id,
      stagePaymentId: stage.id,
      quoteId: stage.quoteId,
      amountMinor: owedMinor,
      currency: stage.currency,
      url,
      createdAt: now,
      expiresAt: session.expires_at ? new Date(session.expires_at * 1000) : expiresAt,
    })
    .onConflictDoNothing();
  return { url, sessionId: session.id, amountMinor: owedMinor };
}
