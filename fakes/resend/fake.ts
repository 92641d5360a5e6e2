import { DeliveryQueue, type Send } from '../state/deliveries';
import { FaultSwitches } from '../state/faults';
import { AnswerLedger } from '../state/idempotency';
import { Store } from '../state/store';
import { lookFile } from '../web/look';
import { json, type FakeRequest, type FakeResponse, type Handle } from '../web/message';
import { answerApi, isApi } from './api';
import { inboxJson, inboxPage, mailPage } from './inbox-page';
import { passTime } from './outcomes';
import { packMessage, setStartWebhook } from './webhooks';
import type { World } from './world';

export type ResendFakeOptions = {
  /** Where state is kept; without it nothing outlives the process. */
  stateFile?: string;
  /** Every event goes here, signed with the secret (`whsec_` and a base64 key). */
  webhook?: { url: string; secret: string };
  /** The fake's clock; the machine's own unless given. Webhook signatures always use the machine's. */
  clock?: () => Date;
  /** Milliseconds between the sending of a mail and "delivered" or "bounced"; 400 unless given. */
  outcomeAfterMs?: number;
  /** How webhooks are sent; by HTTP to this machine unless given. */
  send?: Send;
  /** First wait, in milliseconds, after a webhook that did not arrive. */
  retryBaseMs?: number;
};

/** A Resend that lives in this process: requests in, answers out. */
export type ResendFake = {
  handle: Handle;
  faults: FaultSwitches;
  /** Resolves when no webhook is under way. */
  webhooksSettled: () => Promise<void>;
  close: () => Promise<void>;
};

const CLOCKWORK_MS = 100;

/** Builds the fake; it listens nowhere by itself. */
export function createResendFake(options: ResendFakeOptions = {}): ResendFake {
  const world = createWorld(options);
  const ledger = new AnswerLedger(world.store);
  if (options.webhook) setStartWebhook(world, options.webhook.url, options.webhook.secret);
  world.deliveries.hurry();
  const clockwork = setInterval(() => passTime(world), CLOCKWORK_MS).unref();
  return {
    handle: (request) => answer(world, ledger, request),
    faults: world.faults,
    webhooksSettled: () => world.deliveries.settled(),
    close: async () => {
      clearInterval(clockwork);
      await world.deliveries.close();
      world.store.close();
    },
  };
}

function createWorld(options: ResendFakeOptions): World {
  const store = new Store(options.stateFile ?? null);
  const clock = options.clock ?? (() => new Date());
  const faults: FaultSwitches = new FaultSwitches(() => world.deliveries.hurry());
  const world: World = {
    store,
    tables: { mails: store.table('mails'), events: store.table('events'), webhooks: store.table('webhooks') },
    faults,
    deliveries: new DeliveryQueue(store, {
      pack: (delivery) => packMessage(world, delivery),
      hold: () => faults.holdWebhooks,
      send: options.send,
      retryBaseMs: options.retryBaseMs,
    }),
    now: () => new Date(clock().getTime() + faults.advanceSeconds * 1000),
    outcomeAfterMs: options.outcomeAfterMs ?? 400,
  };
  return world;
}

async function answer(world: World, ledger: AnswerLedger, request: FakeRequest): Promise<FakeResponse> {
  const path = request.url.pathname;
  passTime(world);
  if (isApi(path)) return answerApi(world, ledger, request);
  if (path === '/__control') return world.faults.answer(request);
  const file = lookFile(path);
  if (file) return file;
  if (request.method === 'GET' && path === '/') return inboxPage(world, request.url.searchParams);
  if (request.method === 'GET' && path === '/__inbox') return inboxJson(world, request.url.searchParams);
  if (request.method === 'GET' && path.startsWith('/mail/')) return mailPage(world, path.slice('/mail/'.length));
  return json(404, { statusCode: 404, name: 'not_found', message: 'The requested endpoint does not exist' });
}
