import { mkdtempSync, rmSync } from 'node:fs';
import { createServer, type IncomingHttpHeaders, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Resend } from 'resend';
import Stripe from 'stripe';
import { onTestFinished } from 'vitest';
import type { ResendFakeOptions } from '../../fakes/resend/fake';
import { startResendFake, startStripeFake } from '../../fakes/start';
import type { StripeFakeOptions } from '../../fakes/stripe/fake';

export const STRIPE_SECRET = 'whsec_test_of_the_pay_page';
/** svix secrets hold a base64 key behind their prefix. */
export const MAIL_SECRET = `whsec_${Buffer.from('a key for the inbox of a test').toString('base64')}`;

/** A folder that is gone after the test. */
export function freshFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'pourwright-fakes-'));
  onTestFinished(() => rmSync(folder, { recursive: true, force: true }));
  return folder;
}

/** The official client, pointed at a fake. */
export function stripeClient(port: number, key = 'sk_test_pourwright', maxNetworkRetries = 0): Stripe {
  return new Stripe(key, { host: '127.0.0.1', port, protocol: 'http', maxNetworkRetries, telemetry: false });
}

/** A running Stripe fake and its official client. */
export async function runStripe(options: StripeFakeOptions = {}) {
  const server = await startStripeFake({ retryBaseMs: 2, ...options });
  let open = true;
  const close = async (): Promise<void> => {
    if (open) await server.close();
    open = false;
  };
  onTestFinished(close);
  return { ...server, close, stripe: stripeClient(server.port) };
}

/** A running Resend fake and its official client. */
export async function runResend(options: ResendFakeOptions = {}) {
  const server = await startResendFake({ retryBaseMs: 2, outcomeAfterMs: 0, ...options });
  let open = true;
  const close = async (): Promise<void> => {
    if (open) await server.close();
    open = false;
  };
  onTestFinished(close);
  return { ...server, close, resend: new Resend('re_pourwright', { baseUrl: server.url }) };
}

export type Received = { headers: IncomingHttpHeaders; body: string };

/** A server that takes webhooks and keeps them; `answer` decides what it says to each. */
export async function runReceiver(answer: (received: Received, count: number) => number = () => 200, port = 0) {
  const all: Received[] = [];
  const waiting: { count: number; ready: () => void }[] = [];
  const server: Server = createServer((request, response) => {
    const chunks: Buffer[] = [];
    request.on('data', (chunk: Buffer) => chunks.push(chunk));
    request.on('end', () => {
      const received = { headers: request.headers, body: Buffer.concat(chunks).toString('utf8') };
      all.push(received);
      response.writeHead(answer(received, all.length)).end();
      for (const one of waiting) if (all.length >= one.count) one.ready();
    });
  });
  await new Promise<void>((resolve) => server.listen(port, '127.0.0.1', resolve));
  const close = (): Promise<void> => {
    server.closeAllConnections();
    return new Promise((resolve) => server.close(() => resolve()));
  };
  onTestFinished(async () => {
    if (server.listening) await close();
  });
  /** Resolves with everything received once there are `count`. */
  const until = async (count: number): Promise<Received[]> => {
    if (all.length < count) await new Promise<void>((ready) => waiting.push({ count, ready }));
    return all;
  };
  return { all, until, close, url: `http://127.0.0.1:${(server.address() as AddressInfo).port}/webhook` };
}

/** One line of a session, amount in pence. */
export function line(name: string, pence: number, quantity = 1): Stripe.Checkout.SessionCreateParams.LineItem {
  return { quantity, price_data: { currency: 'gbp', unit_amount: pence, product_data: { name } } };
}

/** The parameters of a usual session: a deposit of £660.00. */
export function deposit(more: Stripe.Checkout.SessionCreateParams = {}): Stripe.Checkout.SessionCreateParams {
  return {
    mode: 'payment',
    line_items: [line('Leaf-shaped sword: deposit', 66_000)],
    customer_email: 'isolde@example.org',
    success_url: 'http://localhost:4321/paid?session={CHECKOUT_SESSION_ID}',
    cancel_url: 'http://localhost:4321/commission',
    ...more,
  };
}

/** Posts a plain HTML form as a browser without scripts does, and does not follow the redirect. */
export function postForm(url: string, fields: Record<string, string>): Promise<Response> {
  return fetch(url, { method: 'POST', body: new URLSearchParams(fields), redirect: 'manual' });
}

/** Presses a button of the page that plays the bank. */
export function press(base: string, act: string, id: string): Promise<Response> {
  return postForm(`${base}/act`, { act, id });
}

/** Sets fault switches. */
export async function control(base: string, switches: Record<string, unknown>): Promise<Response> {
  const headers = { 'content-type': 'application/json' };
  return fetch(`${base}/__control`, { method: 'POST', headers, body: JSON.stringify(switches) });
}

/** The error a promise ends in; fails when it ends well. */
export async function errorOf(work: Promise<unknown>): Promise<Stripe.errors.StripeError> {
  const outcome = await work.then(
    () => null,
    (error: unknown) => error,
  );
  if (outcome instanceof Stripe.errors.StripeError) return outcome;
  throw new Error(`Expected a Stripe error, got ${String(outcome)}`);
}
