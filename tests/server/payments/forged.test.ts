// Stripe's documentation of webhook signatures (HMAC-SHA256 over the raw body, 300 s); reliability plan row 2.
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ledgerEntries, stripeEvents } from '../../../src/server/db/schema/quotes';
import {
  agreed,
  ledgerOf,
  openPage,
  openPayingStudio,
  paidUnseen,
  payAt,
  post,
  typeOf,
  type PayingStudio,
} from '../../factories/paying-studio';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

describe('what is not from Stripe', () => {
  const seen = () => studio.services.db.select().from(stripeEvents);
  const booked = () => studio.services.db.select().from(ledgerEntries);

  async function forgeries() {
    const { completed, ref } = await paidUnseen(studio);
    const { stripe, config } = studio.services;
    const sign = (payload: string, secret = config.stripeWebhookSecret, timestamp = Math.floor(Date.now() / 1000)) =>
      stripe.webhooks.generateTestHeaderString({ payload, secret, timestamp });
    const { body } = completed;
    const now = Math.floor(Date.now() / 1000);
    const other = JSON.stringify({ ...(JSON.parse(body) as object), id: 'evt_forged' });
    const kinds: [string, string | undefined, string][] = [
      ['no signature', undefined, body],
      ['an empty signature', '', body],
      ['a made-up signature', `t=${now},v1=${'0'.repeat(64)}`, body],
      ['the right signature of another body', sign(body), other],
      ['the secret of somebody else', sign(body, 'whsec_of_somebody_else'), body],
      ['an empty secret', sign(body, 'whsec_'), body],
      ['a signature six minutes old', sign(body, undefined, now - 361), body],
      ['a signature of three days ago', sign(body, undefined, now - 259_200), body],
      ['a signature of the future', sign(body, undefined, now + 3_600), body],
      ['a body written anew', sign(body), JSON.stringify(JSON.parse(body), null, 1)],
      ['only the old scheme', sign(body).replace('v1=', 'v0='), body],
      ['no JSON, though signed', sign('not json'), 'not json'],
    ];
    return { kinds, completed, ref };
  }

  it('is refused with 400 and writes nothing; the true event then still books', async () => {
    const { kinds, completed, ref } = await forgeries();
    const before = [(await seen()).length, (await booked()).length];
    for (const [what, signature, body] of kinds) {
      const headers: Record<string, string> = { 'content-type': 'application/json' };
      if (signature !== undefined) headers['stripe-signature'] = signature;
      expect((await post(studio, { headers, body })).status, what).toBe(400);
    }
    expect(kinds).toHaveLength(12);
    expect([(await seen()).length, (await booked()).length]).toEqual(before);
    expect((await post(studio, completed)).body.outcome).toBe('booked');
    expect(await ledgerOf(studio, ref)).toHaveLength(1);
  });

  it('signed well but telling of a session that Stripe does not know is kept as seen and books nothing', async () => {
    const { completed } = await paidUnseen(studio);
    const { stripe, config } = studio.services;
    const event = JSON.parse(completed.body) as { id: string; data: { object: { id: string } } };
    event.id = 'evt_of_nothing';
    event.data.object.id = 'cs_test_nothing';
    const body = JSON.stringify(event);
    const signature = stripe.webhooks.generateTestHeaderString({ payload: body, secret: config.stripeWebhookSecret });
    const before = (await booked()).length;
    const answer = await post(studio, { headers: { 'stripe-signature': signature }, body });
    expect(answer).toMatchObject({ status: 200, body: { outcome: 'ignored' } });
    expect((await booked()).length).toBe(before);
  });

  it('signed well but lying about the sum books what Stripe says', async () => {
    const { completed, ref, stage } = await paidUnseen(studio);
    const { stripe, config } = studio.services;
    const event = JSON.parse(completed.body) as { id: string; data: { object: { amount_total: number } } };
    event.id = 'evt_that_lies';
    event.data.object.amount_total = 1;
    const body = JSON.stringify(event);
    const signature = stripe.webhooks.generateTestHeaderString({ payload: body, secret: config.stripeWebhookSecret });
    await post(studio, { headers: { 'stripe-signature': signature }, body });
    expect(await ledgerOf(studio, ref)).toMatchObject([{ amountMinor: stage.grossMinor }]);
  });

  it('an event of a kind we have no use for is kept as seen, so that it is not sent again', async () => {
    await paidUnseen(studio).then(async ({ completed }) => post(studio, completed));
    const ref = await agreed(studio);
    await payAt(studio, (await openPage(studio, ref)).url);
    const others = studio.parcels.splice(0).filter((parcel) => !typeOf(parcel).startsWith('checkout.session.'));
    expect(others.length).toBeGreaterThan(0);
    for (const parcel of others) expect((await post(studio, parcel)).body.outcome).toBe('ignored');
    expect(await ledgerOf(studio, ref)).toEqual([]);
  });
});
