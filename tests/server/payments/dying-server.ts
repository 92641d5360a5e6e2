import { sql } from 'drizzle-orm';
import Stripe from 'stripe';
import { readConfig } from '../../../src/server/config';
import { recordStripeEvent } from '../../../src/server/money/payments';
import { createServices, type Services } from '../../../src/server/services';

/**
 * A server that is killed while it takes in an event. Arguments: the database, Stripe's port, the event, the point:
 * `asked` after Stripe has answered, `written` before the transaction is committed, `committed` before the answer is sent.
 */
const [databaseUrl, stripePort, event, point] = process.argv.slice(2);
const stripe = new Stripe('sk_test_pourwright', { host: '127.0.0.1', port: Number(stripePort), protocol: 'http' });
const die = () => process.kill(process.pid, 'SIGKILL');

const { retrieve } = stripe.checkout.sessions;
if (point === 'asked') {
  stripe.checkout.sessions.retrieve = (async (...given: Parameters<typeof retrieve>) => {
    await retrieve.apply(stripe.checkout.sessions, given);
    die();
    return new Promise(() => undefined);
  }) as typeof retrieve;
}
const config = { ...readConfig({ LOG_LEVEL: 'silent' }), databaseUrl: databaseUrl! };
const services = createServices(config, { stripe });
const db = services.db;
const begin = db.transaction.bind(db);
if (point === 'written') {
  services.db = Object.assign(Object.create(db) as Services['db'], {
    transaction: (work: Parameters<typeof begin>[0]) =>
      begin(async (tx) => {
        await work(tx);
        // All is written and nothing is committed.
        await tx.execute(sql`select 1`);
        die();
        return new Promise(() => undefined);
      }),
  });
}
await recordStripeEvent(services, JSON.parse(event!) as Stripe.Event);
die();
