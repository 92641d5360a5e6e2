import type Stripe from 'stripe';
import type { DeliveryQueue } from '../state/deliveries';
import type { FaultSwitches } from '../state/faults';
import type { Store, Table } from '../state/store';

/** The version every object and event is written in: the one the pinned SDK asks for. */
export const API_VERSION = '2026-10-28.endive';

/** How a payment was made; keeps what only the card network would know. */
export type Means = {
  id: string;
  kind: 'card' | 'debit';
  /** The test card's number, or the debit scheme's name. */
  number: string;
  email: string;
};

/** A price as it goes over the wire: decimals are text there. */
type PriceOnWire = Omit<Stripe.Price, 'unit_amount_decimal'> & { unit_amount_decimal: string | null };
export type LineOnWire = Omit<Stripe.LineItem, 'price'> & { price: PriceOnWire | null };

/** What is kept beside a session that its own fields do not show. */
export type SessionNotes = {
  id: string;
  lines: LineOnWire[];
  intent: { metadata: Stripe.Metadata; description: string | null; receipt_email: string | null };
  statement: string | null;
  studio: string;
};

/** An event as kept: how many deliveries are still open is counted when it is read. */
export type KeptEvent = Omit<Stripe.EventBase, 'pending_webhooks' | 'type'> & { type: string };

export type Tables = {
  customers: Table<Stripe.Customer>;
  sessions: Table<Stripe.Checkout.Session>;
  notes: Table<SessionNotes>;
  intents: Table<Stripe.PaymentIntent>;
  charges: Table<Stripe.Charge>;
  means: Table<Means>;
  refunds: Table<Stripe.Refund>;
  balance: Table<Stripe.BalanceTransaction>;
  events: Table<KeptEvent>;
  endpoints: Table<Stripe.WebhookEndpoint & { secret: string }>;
};

/** Everything a request may touch. */
export type World = {
  store: Store;
  tables: Tables;
  deliveries: DeliveryQueue;
  faults: FaultSwitches;
  /** Unix seconds by the fake's clock. */
  now: () => number;
  /** Where people open the pay page; no slash at the end. */
  publicUrl: () => string;
  /** The name on the pay page when a session brings none. */
  studio: string;
  /** The request that is being worked on, for the events it causes; null for what people do on the pages. */
  cause: Stripe.Event.Request | null;
};

/** The tables of a store. */
export function openTables(store: Store): Tables {
  return {
    customers: store.table('customers'),
    sessions: store.table('sessions'),
    notes: store.table('notes'),
    intents: store.table('intents'),
    charges: store.table('charges'),
    means: store.table('means'),
    refunds: store.table('refunds'),
    balance: store.table('balance'),
    events: store.table('events'),
    endpoints: store.table('endpoints'),
  };
}
