import type Stripe from 'stripe';
import { freshId } from '../state/ids';
import { customerOnFile } from './customers';
import { Refusal, badParam, noSuch } from './errors';
import { emit } from './events';
import { cancelIntent } from './intents';
import { inRange, pageOf } from './lists';
import { readParams } from './params';
import type { Route } from './routes';
import { pagingSchema, sessionListSchema, sessionSchema, type SessionInput } from './session-params';
import { lineOnWire, openSession } from './session-shape';
import type { World } from './world';

/** The delayed method a page offers, by currency. */
const DEBITS: Record<string, string> = { gbp: 'bacs_debit', eur: 'sepa_debit', usd: 'us_bank_account' };

/** Smallest charge in minor units (Stripe's page on minimum amounts, from memory); other currencies: 50. */
const SMALLEST: Record<string, number> = { gbp: 30, eur: 50, usd: 50 };

const SHORTEST_LIFE_SECONDS = 30 * 60;
const LONGEST_LIFE_SECONDS = 24 * 60 * 60;

function createSession(world: World, input: SessionInput): Stripe.Checkout.Session {
  const now = world.now();
  checkLife(input.expires_at, now);
  const person = payer(world, input);
  const lines = input.line_items.map((line) => lineOnWire(line, now));
  const currency = lines[0]?.currency ?? '';
  if (lines.some((line) => line.currency !== currency)) {
    throw badParam('line_items', 'All line items must be in the same currency.');
  }
  const amount = lines.reduce((sum, line) => sum + line.amount_total, 0);
  const smallest = SMALLEST[currency] ?? 50;
  if (amount < smallest) {
    const message = `The Checkout Session's total must be at least ${smallest} in minor units of ${currency}.`;
    throw new Refusal(400, message, { code: 'amount_too_small' });
  }
  const id = freshId('cs_test_', 58);
  const methods = input.payment_method_types ?? usualMethods(currency);
  const url = `${world.publicUrl()}/pay/${id}`;
  const session = openSession(input, { id, now, url, currency, amount, methods, email: person });
  const intent = input.payment_intent_data;
  world.tables.notes.put(id, {
    id,
    lines,
    intent: {
      metadata: intent?.metadata ?? {},
      description: intent?.description ?? null,
      receipt_email: intent?.receipt_email ?? null,
    },
    statement: intent?.statement_descriptor ?? null,
    studio: input.branding_settings?.display_name ?? world.studio,
  });
  return world.tables.sessions.put(id, session);
}

function usualMethods(currency: string): string[] {
  const debit = DEBITS[currency];
  return debit ? ['card', debit] : ['card'];
}

function checkLife(expiresAt: number | undefined, now: number): void {
  if (expiresAt === undefined) return;
  // A few seconds of grace: the caller counted from its own clock before the request travelled.
  if (expiresAt < now + SHORTEST_LIFE_SECONDS - 5) {
    throw badParam(
      'expires_at',
      'The `expires_at` timestamp must be at least 30 minutes from Checkout Session creation.',
    );
  }
  if (expiresAt > now + LONGEST_LIFE_SECONDS + 5) {
    throw badParam(
      'expires_at',
      'The `expires_at` timestamp must be less than 24 hours from Checkout Session creation.',
    );
  }
}

/** The payer's e-mail address as far as the caller gave it. */
function payer(world: World, input: SessionInput): string | null {
  if (input.customer && input.customer_email) {
    throw badParam(
      'customer_email',
      'You may only specify one of these parameters: customer, customer_email.',
      'parameters_exclusive',
    );
  }
  if (input.customer) return customerOnFile(world, input.customer, 'customer').email;
  return input.customer_email ?? null;
}

/** The session with this id. @throws Refusal (404) when there is none. */
export function sessionOnFile(world: World, id: string): Stripe.Checkout.Session {
  const session = world.tables.sessions.get(id);
  if (!session) throw noSuch('checkout.session', id, 'session');
  return session;
}

/** Ends an open session. Call inside a write. @throws Refusal when it is complete or over already. */
export function expireSession(world: World, id: string): Stripe.Checkout.Session {
  const session = sessionOnFile(world, id);
  if (session.status !== 'open') {
    const message = `Only Checkout Sessions with a status in ["open"] can be expired. This Checkout Session has a status of \`${session.status}\`.`;
    throw new Refusal(400, message);
  }
  const expired: Stripe.Checkout.Session = { ...session, status: 'expired', url: null };
  world.tables.sessions.put(id, expired);
  if (typeof session.payment_intent === 'string') cancelIntent(world, session.payment_intent, 'abandoned');
  emit(world, 'checkout.session.expired', expired);
  return expired;
}

/** Ends every open session whose time is over. */
export function expireOverdue(world: World): void {
  const now = world.now();
  const overdue = world.tables.sessions
    .all()
    .filter((session) => session.status === 'open' && session.expires_at <= now);
  if (overdue.length > 0) world.store.write(() => overdue.forEach((session) => expireSession(world, session.id)));
}

function list(world: World, input: Record<string, unknown>): object {
  const wanted = readParams(sessionListSchema, input as Parameters<typeof readParams>[1]);
  const rows = world.tables.sessions
    .newest()
    .filter((session) => inRange(session.created, wanted.created))
    .filter((session) => !wanted.customer || session.customer === wanted.customer)
    .filter((session) => !wanted.customer_details || session.customer_details?.email === wanted.customer_details.email)
    .filter((session) => !wanted.payment_intent || session.payment_intent === wanted.payment_intent)
    .filter((session) => !wanted.status || session.status === wanted.status);
  return pageOf(rows, wanted, '/v1/checkout/sessions');
}

export const sessionRoutes: Route[] = [
  {
    method: 'POST',
    path: '/v1/checkout/sessions',
    run: ({ world, input }) => createSession(world, readParams(sessionSchema, input)),
  },
  { method: 'GET', path: '/v1/checkout/sessions', run: ({ world, input }) => list(world, input) },
  { method: 'GET', path: '/v1/checkout/sessions/:id', run: ({ world, id }) => sessionOnFile(world, id) },
  { method: 'POST', path: '/v1/checkout/sessions/:id/expire', run: ({ world, id }) => expireSession(world, id) },
  {
    method: 'GET',
    path: '/v1/checkout/sessions/:id/line_items',
    run: ({ world, id, input }) => {
      sessionOnFile(world, id);
      const lines = world.tables.notes.get(id)?.lines ?? [];
      return pageOf(lines, readParams(pagingSchema, input), `/v1/checkout/sessions/${id}/line_items`);
    },
  },
];
