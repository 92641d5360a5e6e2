import { createHash } from 'node:crypto';
import type { FakeRequest, FakeResponse } from '../web/message';
import type { Store, Table } from './store';

type Kept = {
  fingerprint: string;
  path: string;
  /** Unix seconds. */
  at: number;
  answer: { status: number; headers: Record<string, string>; body: string };
};

export type KeyVerdict =
  | { kind: 'fresh' }
  | { kind: 'replay'; answer: FakeResponse }
  | { kind: 'other-request'; path: string }
  | { kind: 'in-progress' };

/** Both services forget a key after 24 hours (their own documentation pages on idempotency). */
const KEPT_SECONDS = 24 * 60 * 60;

/** What was answered under each idempotency key, and which keys are being worked on right now. */
export class AnswerLedger {
  readonly #table: Table<Kept>;
  readonly #busy = new Set<string>();

  constructor(store: Store) {
    this.#table = store.table<Kept>('answers');
  }

  /** What to do with a request carrying `key`; "fresh" marks the key as being worked on until `done`. */
  begin(key: string, request: FakeRequest, now: number): KeyVerdict {
    if (this.#busy.has(key)) return { kind: 'in-progress' };
    const kept = this.#table.get(key);
    if (kept && now - kept.at < KEPT_SECONDS) {
      if (kept.fingerprint !== fingerprint(request)) return { kind: 'other-request', path: kept.path };
      return { kind: 'replay', answer: kept.answer };
    }
    this.#busy.add(key);
    return { kind: 'fresh' };
  }

  /** Keeps the answer under the key. Call inside the write that did the work. */
  keep(key: string, request: FakeRequest, now: number, answer: FakeResponse): void {
    const { status, headers, body } = answer;
    const text = typeof body === 'string' ? body : Buffer.from(body).toString('utf8');
    this.#table.put(key, {
      fingerprint: fingerprint(request),
      path: request.url.pathname,
      at: now,
      answer: { status, headers, body: text },
    });
  }

  /** Ends the work on a key, whether or not an answer was kept. */
  done(key: string): void {
    this.#busy.delete(key);
  }
}

function fingerprint(request: FakeRequest): string {
  const whole = `${request.method} ${request.url.pathname}${request.url.search}\n${request.body}`;
  return createHash('sha256').update(whole).digest('hex');
}
