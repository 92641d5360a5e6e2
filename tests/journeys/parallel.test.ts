import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import type Stripe from 'stripe';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { commissions, events } from '../../src/server/db/schema/commissions';
import { rateLimits } from '../../src/server/db/schema/people';
import { acceptances, checkoutSessions, ledgerEntries } from '../../src/server/db/schema/quotes';
import { mails } from '../../src/server/db/schema/studio';
import { commission, type Setting } from '../server/deal/deal-setting';
import { holdWebhooks, payOnPage } from './pay-page';
import { agreedCommission, quotedCommission, settingOf, signedIn } from './scene';
import { places, servicesOf, until } from './studio';
import { Visitor, type Answer } from './visitor';

// Twenty near-concurrent requests on a one-time right: OWASP WSTG, business logic testing; ASVS 5.0, 2.3.4 and 15.4.2.
const TWENTY = Array.from({ length: 20 }, (_, index) => index);

let setting: Setting;

beforeAll(async () => {
  setting = await settingOf(servicesOf(), 'Ottoline Marchbanks');
});
// Twenty enquiries use up this machine's allowance for the hour; the other journeys need one too.
afterAll(async () => {
  await setting.services.db.delete(rateLimits);
  await setting.drop();
});

const at20 = (press: () => Promise<Answer>) => Promise.all(TWENTY.map(press));
const valuesOf = (answers: Answer[]) => answers.map((answer) => (JSON.parse(answer.body) as { value: unknown }).value);

describe('twenty presses at once', () => {
  it('of "accept" make one acceptance', async () => {
    const ref = await quotedCommission(setting);
    const visitor = await signedIn(setting.services, setting.customer);
    const ticks = { terms: 'on', bespoke: 'on', mark: 'on', adult: 'on' };
    const answers = await at20(() =>
      visitor.postJson(`/api/commissions/${ref}/accept`, { revision: 1, typedName: 'Ottoline Marchbanks', ...ticks }),
    );
    expect(answers.map((answer) => answer.status)).toEqual(TWENTY.map(() => 200));
    expect(new Set(valuesOf(answers).map((value) => JSON.stringify(value)))).toHaveLength(1);
    const { id } = await commission(setting, ref);
    const { db } = setting.services;
    expect(await db.select().from(acceptances).where(eq(acceptances.commissionId, id))).toHaveLength(1);
    const history = await db.select().from(events).where(eq(events.commissionId, id));
    expect(history.filter((event) => event.code === 'T11')).toHaveLength(1);
    const letters = await db.select().from(mails).where(eq(mails.commissionId, id));
    expect(letters.filter((mail) => mail.letter === 'M11' && mail.to === setting.customer.email)).toHaveLength(1);
  });

  it('of "pay" open one payment page', async () => {
    const { ref, id, stage } = await agreedCommission(setting);
    const visitor = await signedIn(setting.services, setting.customer);
    const answers = await at20(() => visitor.postJson(`/api/commissions/${ref}/pay`, { stage }));
    expect(answers.map((answer) => answer.status)).toEqual(TWENTY.map(() => 200));
    expect(new Set(valuesOf(answers).map((value) => (value as { url: string }).url))).toHaveLength(1);
    const kept = await setting.services.db
      .select()
      .from(checkoutSessions)
      .where(eq(checkoutSessions.stagePaymentId, stage));
    expect(kept).toHaveLength(1);
    const made = await setting.services.stripe.checkout.sessions.list({ limit: 100 });
    expect(made.data.filter((session) => session.metadata?.['commission'] === id)).toHaveLength(1);
  });

  it('of the enquiry’s button make one commission', async () => {
    const visitor = new Visitor();
    await visitor.get('/sign-in');
    const clientId = randomUUID();
    const enquiry = {
      clientId,
      what: 'form',
      form: 'tanged-chisel',
      name: 'Quill Hartshorne',
      email: `quill.${clientId.slice(0, 8)}@example.org`,
      wish: 'A chisel to show how such an edge was sharpened.',
      use: 'display',
      designSource: 'studio-form',
      adult: 'on',
      consent: 'on',
    };
    const answers = await at20(() => visitor.postJson('/api/enquiries', enquiry));
    // The allowance of enquiries an hour counts presses, so some may be told to wait; none may be lost or doubled.
    expect(new Set(answers.map((answer) => answer.status))).toSatisfy((seen: Set<number>) =>
      [...seen].every((status) => status === 200 || status === 429),
    );
    const taken = answers.filter((answer) => answer.status === 200);
    const refs = new Set(valuesOf(taken).map((value) => (value as { ref: string }).ref));
    expect(refs).toHaveLength(1);
    const rows = await setting.services.db.select().from(commissions).where(eq(commissions.clientId, clientId));
    expect(rows.map((row) => row.ref)).toEqual([...refs]);
    const asked = await setting.services.db.select().from(mails).where(eq(mails.to, enquiry.email));
    expect(asked.map((mail) => mail.letter)).toEqual(['M0']);
  });
});

describe('the same signed webhook twenty times at once', () => {
  it('books one ledger entry', async () => {
    const { services } = setting;
    const { ref, id, stage } = await agreedCommission(setting);
    const visitor = await signedIn(services, setting.customer);
    const [page] = valuesOf([await visitor.postJson(`/api/commissions/${ref}/pay`, { stage })]);
    const { url, sessionId, amountMinor } = page as { url: string; sessionId: string; amountMinor: number };
    await holdWebhooks(true);
    try {
      await payOnPage(url);
      const event = await until('the payment’s event', async () => {
        const { data } = await services.stripe.events.list({ type: 'checkout.session.completed', limit: 20 });
        return data.find((each) => (each.data.object as Stripe.Checkout.Session).id === sessionId);
      });
      const payload = JSON.stringify(event);
      const signature = services.stripe.webhooks.generateTestHeaderString({
        payload,
        secret: services.config.stripeWebhookSecret,
      });
      const headers = { 'content-type': 'application/json', 'stripe-signature': signature };
      const send = () => fetch(`${places.url}/api/stripe/webhook`, { method: 'POST', headers, body: payload });
      const answers = await Promise.all(TWENTY.map(send));
      expect(answers.map((answer) => answer.status)).toEqual(TWENTY.map(() => 200));
    } finally {
      await holdWebhooks(false);
    }
    const booked = await services.db.select().from(ledgerEntries).where(eq(ledgerEntries.commissionId, id));
    expect(booked.map(({ kind, amountMinor: minor }) => ({ kind, minor }))).toEqual([
      { kind: 'received', minor: amountMinor },
    ]);
    expect((await commission(setting, ref)).deal).toBe('booked');
    // The service delivers the event itself as well, now that it may: still one entry.
    await until('the service’s own delivery', async () => {
      const { data } = await services.stripe.events.list({ type: 'checkout.session.completed', limit: 20 });
      const event = data.find((each) => (each.data.object as Stripe.Checkout.Session).id === sessionId);
      return event?.pending_webhooks === 0;
    });
    expect(await services.db.select().from(ledgerEntries).where(eq(ledgerEntries.commissionId, id))).toHaveLength(1);
  });
});
