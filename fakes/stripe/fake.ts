import { DeliveryQueue, type Send } from '../state/deliveries';
import { FaultSwitches } from '../state/faults';
import { AnswerLedger } from '../state/idempotency';
import { Store } from '../state/store';
import { lookFile } from '../web/look';
import { json, type FakeRequest, type FakeResponse, type Handle } from '../web/message';
import { answerApi } from './api';
import { packEvent, setStartEndpoint } from './endpoints';
import { overviewPage, act } from './overview-page';
import { answerPay } from './pay-routes';
import { endDebit } from './payments';
import { expireOverdue } from './sessions';
import { openTables, type World } from './world';

export type StripeFakeOptions = {
  /** Where state is kept; without it nothing outlives the process. */
  stateFile?: string;
  /** Every event goes here, signed with the secret. */
  webhook?: { url: string; secret: string };
  /** The fake's clock; the machine's own unless given. Webhook signatures always use the machine's. */
  clock?: () => Date;
  /** Where people open the pay page, such as http://localhost:4322. */
  publicUrl?: string;
  /** The name on the pay page when a session brings none. */
  studio?: string;
  /** Seconds after which a delayed payment arrives by itself; without it somebody has to press the button. */
  settleAfterSeconds?: number;
  /** How webhooks are sent; by HTTP to this machine unless given. */
  send?: Send;
  /** First wait, in milliseconds, after a webhook that did not arrive. */
  retryBaseMs?: number;
};

/** A Stripe that lives in this process: requests in, answers out. */
export type StripeFake = {
  handle: Handle;
  faults: FaultSwitches;
  /** Where the pay pages are, once a server knows its address. */
  setPublicUrl: (url: string) => void;
  /** Resolves when no webhook is under way. */
  webhooksSettled: () => Promise<void>;
  close: () => Promise<void>;
};

/** Builds the fake; it listens nowhere by itself. */
export function createStripeFake(options: StripeFakeOptions = {}): StripeFake {
  let publicUrl = options.publicUrl ?? 'https://api.stripe.com';
  const world = createWorld(options, () => publicUrl);
  const ledger = new AnswerLedger(world.store);
  if (options.webhook) setStartEndpoint(world, options.webhook.url, options.webhook.secret);
  world.deliveries.hurry();
  const clockwork = setInterval(() => passTime(world, options.settleAfterSeconds), 1000).unref();
  return {
    handle: (request) => {
      passTime(world, options.settleAfterSeconds);
      return answer(world, ledger, request);
    },
    faults: world.faults,
    setPublicUrl: (url) => {
      publicUrl = url;
    },
    webhooksSettled: () => world.deliveries.settled(),
    close: async () => {
      clearInterval(clockwork);
      await world.deliveries.close();
      world.store.close();
    },
  };
}

function createWorld(options: StripeFakeOptions, publicUrl: () => string): World {
  const store = new Store(options.stateFile ?? null);
  const clock = options.clock ?? (() => new Date());
  const faults: FaultSwitches = new FaultSwitches(() => world.deliveries.hurry());
  const world: World = {
    store,
    tables: openTables(store),
    faults,
    deliveries: new DeliveryQueue(store, {
      pack: (delivery) => packEvent(world, delivery),
      hold: () => faults.holdWebhooks,
      send: options.send,
      retryBaseMs: options.retryBaseMs,
    }),
    now: () => Math.floor(clock().getTime() / 1000) + faults.advanceSeconds,
    publicUrl,
    studio: options.studio ?? 'The studio',
    cause: null,
  };
  return world;
}

/** What happens without anybody asking: sessions end, delayed payments arrive. */
function passTime(world: World, settleAfterSeconds: number | undefined): void {
  expireOverdue(world);
  if (settleAfterSeconds !== undefined) {
    const due = world.now() - settleAfterSeconds;
    for (const session of world.tables.sessions.all()) {
      const intent =
        typeof session.payment_intent === 'string' ? world.tables.intents.get(session.payment_intent) : null;
      const charge = typeof intent?.latest_charge === 'string' ? world.tables.charges.get(intent.latest_charge) : null;
      if (intent?.status === 'processing' && charge && charge.created <= due) {
        world.store.write(() => endDebit(world, session.id, true));
      }
    }
  }
  world.deliveries.wake();
}

async function answer(world: World, ledger: AnswerLedger, request: FakeRequest): Promise<FakeResponse> {
  const path = request.url.pathname;
  if (path.startsWith('/v1/') || path.startsWith('/v2/')) return answerApi(world, ledger, request);
  if (path === '/__control') return world.faults.answer(request);
  const file = lookFile(path);
  if (file) return file;
  if (path === '/' && request.method === 'GET') return overviewPage(world);
  if (path === '/act' && request.method === 'POST') return act(world, request);
  if (path.startsWith('/pay/')) return answerPay(world, request);
  return json(404, {
    error: { type: 'invalid_request_error', message: `Unrecognized request URL (${request.method}: ${path}).` },
  });
}
