import { freshId } from './ids';
import type { Store, Table } from './store';

/** One webhook on its way: one event to one endpoint. Times are Unix milliseconds. */
export type Delivery = {
  id: string;
  event: string;
  endpoint: string;
  state: 'waiting' | 'delivered' | 'given-up';
  attempts: number;
  createdAt: number;
  nextAt: number;
  lastStatus: number | null;
  lastError: string | null;
};

/** What goes over the wire for one attempt; null when the event or the endpoint is gone. */
export type Parcel = { url: string; headers: Record<string, string>; body: string };

/** Sends a parcel and gives the status code; throws when there was no answer. */
export type Send = (parcel: Parcel, signal: AbortSignal) => Promise<number>;

export type DeliveryOptions = {
  /** Addresses and signs one attempt. */
  pack: (delivery: Delivery) => Parcel | null;
  hold: () => boolean;
  send?: Send;
  /** First wait after a failure; doubles each time up to 20 s. */
  retryBaseMs?: number;
};

/** Stripe's documented limit for live mode: attempts for up to three days. */
const GIVE_UP_AFTER_MS = 3 * 24 * 60 * 60 * 1000;
const LONGEST_WAIT_MS = 20_000;
const ANSWER_WITHIN_MS = 10_000;
const AT_ONCE = 8;

/**
 * Webhooks on their way, kept in the store: an attempt that gets no 2xx is made again with growing waits, also after
 * a restart. No order is promised, and an attempt whose outcome a crash hid is made again.
 */
export class DeliveryQueue {
  readonly #store: Store;
  readonly #table: Table<Delivery>;
  readonly #options: DeliveryOptions;
  readonly #waiting = new Set<string>();
  readonly #byEvent = new Map<string, string[]>();
  readonly #underWay = new Map<string, Promise<void>>();
  readonly #closing = new AbortController();
  #timer: NodeJS.Timeout | null = null;

  constructor(store: Store, options: DeliveryOptions) {
    this.#store = store;
    this.#table = store.table<Delivery>('deliveries');
    this.#options = options;
    for (const delivery of this.#table.all()) this.#index(delivery);
  }

  /** Adds a delivery inside the write that made the event; `wake` sends it afterwards. */
  add(event: string, endpoint: string): void {
    const now = Date.now();
    const id = freshId('dl_');
    const fresh = { state: 'waiting', attempts: 0, lastStatus: null, lastError: null } as const;
    this.#index(this.#table.put(id, { id, event, endpoint, createdAt: now, nextAt: now, ...fresh }));
  }

  /** All deliveries of one event, oldest first. */
  of(event: string): Delivery[] {
    return (this.#byEvent.get(event) ?? []).flatMap((id) => this.#table.get(id) ?? []);
  }

  /** Makes what waits due at once: after a start, or when somebody asks for it. */
  hurry(): void {
    this.#store.write(() => {
      for (const id of this.#waiting) {
        const delivery = this.#table.get(id);
        if (delivery) this.#table.put(id, { ...delivery, nextAt: Date.now() });
      }
    });
    this.wake();
  }

  /** Sends what is due and sets the alarm for the next. */
  wake(): void {
    if (this.#timer) clearTimeout(this.#timer);
    this.#timer = null;
    if (this.#closing.signal.aborted || this.#options.hold()) return;
    const now = Date.now();
    let next = Infinity;
    for (const id of this.#waiting) {
      const delivery = this.#table.get(id);
      if (!delivery || this.#underWay.has(id)) continue;
      if (delivery.nextAt > now) next = Math.min(next, delivery.nextAt);
      else if (this.#underWay.size < AT_ONCE) this.#start(delivery);
    }
    if (next < Infinity) this.#timer = setTimeout(() => this.wake(), next - now).unref();
  }

  /** Resolves when no attempt is under way. Those that wait for their time keep waiting. */
  async settled(): Promise<void> {
    while (this.#underWay.size > 0) await Promise.all(this.#underWay.values());
  }

  /** Stops for good; what waits stays in the store. */
  async close(): Promise<void> {
    this.#closing.abort();
    if (this.#timer) clearTimeout(this.#timer);
    await this.settled();
  }

  #index(delivery: Delivery): void {
    const ids = this.#byEvent.get(delivery.event);
    if (ids) ids.push(delivery.id);
    else this.#byEvent.set(delivery.event, [delivery.id]);
    if (delivery.state === 'waiting') this.#waiting.add(delivery.id);
  }

  #start(delivery: Delivery): void {
    const attempt = this.#attempt(delivery).finally(() => {
      this.#underWay.delete(delivery.id);
      this.wake();
    });
    this.#underWay.set(delivery.id, attempt);
  }

  async #attempt(delivery: Delivery): Promise<void> {
    const parcel = this.#options.pack(delivery);
    let status: number | null = null;
    let failure: string | null = parcel ? null : 'the endpoint is gone';
    if (parcel) {
      try {
        const timeout = AbortSignal.timeout(ANSWER_WITHIN_MS);
        status = await (this.#options.send ?? post)(parcel, AbortSignal.any([timeout, this.#closing.signal]));
      } catch (error) {
        failure = error instanceof Error ? reason(error) : String(error);
      }
    }
    if (!this.#closing.signal.aborted) this.#enter(delivery, status, failure, parcel !== null);
  }

  #enter(delivery: Delivery, status: number | null, failure: string | null, again: boolean): void {
    const attempts = delivery.attempts + 1;
    const base = this.#options.retryBaseMs ?? 500;
    const wait = Math.min(base * 2 ** (attempts - 1), LONGEST_WAIT_MS);
    const late = Date.now() - delivery.createdAt > GIVE_UP_AFTER_MS;
    const arrived = status !== null && status >= 200 && status < 300;
    const state = arrived ? 'delivered' : again && !late ? 'waiting' : 'given-up';
    if (state !== 'waiting') this.#waiting.delete(delivery.id);
    const nextAt = Date.now() + wait;
    this.#store.write(() => {
      this.#table.put(delivery.id, { ...delivery, state, attempts, nextAt, lastStatus: status, lastError: failure });
    });
  }
}

function reason(error: Error): string {
  const cause = error.cause instanceof Error ? error.cause.message : '';
  return cause || error.message;
}

/** Posts a parcel to an address on this machine; any other host is refused unsent. */
async function post(parcel: Parcel, signal: AbortSignal): Promise<number> {
  const host = new URL(parcel.url).hostname;
  if (!['127.0.0.1', 'localhost', '[::1]'].includes(host)) throw new Error(`${host} is not on this machine: not sent`);
  const { headers, body } = parcel;
  const response = await fetch(parcel.url, { method: 'POST', headers, body, signal, redirect: 'manual' });
  await response.arrayBuffer();
  return response.status;
}
