import { z } from 'zod';
import { json, type FakeRequest, type FakeResponse } from '../web/message';

const faultsSchema = z.strictObject({
  /** No webhook leaves while true; all that waited go out when it becomes false. */
  holdWebhooks: z.boolean(),
  /** Each event is delivered this many times, as a careless network would. */
  webhookCopies: z.int().min(1).max(20),
  /** So many requests are worked on but never answered: the connection just ends. */
  dropAnswers: z.int().min(0),
  /** So many requests are answered by an error instead; with `after`, the work is done first. */
  errors: z.strictObject({
    times: z.int().min(0),
    status: z.union([z.literal(429), z.literal(500), z.literal(503)]).default(500),
    retryAfterSeconds: z.int().min(0).default(1),
    after: z.boolean().default(false),
  }),
  /** Milliseconds each request waits before it is worked on. */
  delayMs: z.int().min(0).max(120_000),
  /** Faults strike only requests whose path begins so. */
  path: z.string(),
  /** Seconds by which the fake's own clock runs ahead. */
  advanceSeconds: z.int().min(0),
});

type Faults = z.infer<typeof faultsSchema>;

const NONE: Faults = {
  holdWebhooks: false,
  webhookCopies: 1,
  dropAnswers: 0,
  errors: { times: 0, status: 500, retryAfterSeconds: 1, after: false },
  delayMs: 0,
  path: '/',
  advanceSeconds: 0,
};

/** What will go wrong with one request. */
export type Strike = {
  delayMs: number;
  drop: boolean;
  error: { status: 429 | 500 | 503; retryAfterSeconds: number; after: boolean } | null;
};

/** The switches behind `/__control`: what goes wrong on purpose, for tests and for showing how the shop bears it. */
export class FaultSwitches {
  #faults: Faults = NONE;
  readonly #changed: () => void;

  /** `changed` runs after each change: it sends at once every webhook that was held or waits for its next attempt. */
  constructor(changed: () => void) {
    this.#changed = changed;
  }

  get holdWebhooks(): boolean {
    return this.#faults.holdWebhooks;
  }

  get webhookCopies(): number {
    return this.#faults.webhookCopies;
  }

  get advanceSeconds(): number {
    return this.#faults.advanceSeconds;
  }

  /** Sets some switches and leaves the others; throws a ZodError for an unknown one. */
  set(changes: Partial<z.input<typeof faultsSchema>>): void {
    this.#faults = faultsSchema.parse({ ...this.#faults, ...changes });
    this.#changed();
  }

  /** Takes this request's share of the faults; counts go down by one. */
  strike(path: string): Strike {
    const { errors, dropAnswers, delayMs } = this.#faults;
    if (!path.startsWith(this.#faults.path)) return { delayMs: 0, drop: false, error: null };
    const fails = errors.times > 0;
    const drop = !fails && dropAnswers > 0;
    if (fails) this.#faults = { ...this.#faults, errors: { ...errors, times: errors.times - 1 } };
    if (drop) this.#faults = { ...this.#faults, dropAnswers: dropAnswers - 1 };
    return { delayMs, drop, error: fails ? errors : null };
  }

  /** GET shows the switches, POST (JSON only, which no foreign page can send) sets some, DELETE puts all back. */
  answer(request: FakeRequest): FakeResponse {
    if (request.method === 'GET') return json(200, this.#faults);
    if (request.method === 'DELETE') {
      this.#faults = NONE;
      this.#changed();
      return json(200, this.#faults);
    }
    if (request.method !== 'POST') return json(405, { message: 'Use GET, POST or DELETE.' });
    if (!request.headers['content-type']?.startsWith('application/json')) {
      return json(415, { message: 'Send the switches as application/json.' });
    }
    const changes = readJson(request.body);
    const parsed = faultsSchema.partial().safeParse(changes);
    if (!parsed.success) return json(400, { message: z.prettifyError(parsed.error), switches: Object.keys(NONE) });
    this.set(parsed.data);
    return json(200, this.#faults);
  }
}

function readJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}
