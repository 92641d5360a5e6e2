import type { AnswerLedger } from '../state/idempotency';
import type { Strike } from '../state/faults';
import { without } from '../state/rows';
import { json, type FakeRequest, type FakeResponse } from '../web/message';
import { MailRefusal, refusalAnswer } from './errors';
import { readMail } from './mail-params';
import { cut, listMails, sendBatch, sendMail, showMail } from './mails';
import { createWebhook, removeWebhook, webhookOnFile } from './webhooks';
import type { World } from './world';

/** The one key that is taken. */
export const RESEND_KEY = 're_pourwright';

const LONGEST_KEY = 256;

type Work = (world: World) => object;

/** Whether a path belongs to the API rather than to the inbox pages. */
export function isApi(path: string): boolean {
  return /^\/(emails|webhooks)(\/|$)/.test(path);
}

/** Answers one API request: key, faults, idempotency, then the work itself, on disk before the answer. */
export async function answerApi(world: World, ledger: AnswerLedger, request: FakeRequest): Promise<FakeResponse> {
  try {
    const sends = request.method === 'POST' && request.url.pathname.startsWith('/emails');
    checkKey(request.headers['authorization'], sends);
    const strike = world.faults.strike(request.url.pathname);
    if (strike.error && !strike.error.after) return faultAnswer(strike.error);
    const key = sends ? request.headers['idempotency-key'] : undefined;
    const answer =
      key === undefined ? await work(world, request, strike) : await answerOnce(world, ledger, request, strike, key);
    return strike.drop ? { ...answer, lost: true } : answer;
  } catch (error) {
    if (error instanceof MailRefusal) return refusalAnswer(error);
    throw error;
  }
}

function checkKey(authorization: string | undefined, sends: boolean): void {
  const key = /^Bearer (.+)$/.exec(authorization ?? '')?.[1];
  if (!key) throw new MailRefusal(401, 'missing_api_key', 'Missing API Key');
  if (key !== RESEND_KEY) throw new MailRefusal(sends ? 401 : 400, 'validation_error', 'API key is invalid');
}

function faultAnswer(fault: NonNullable<Strike['error']>): FakeResponse {
  const wait = String(fault.retryAfterSeconds);
  const limits = { 'ratelimit-limit': '2', 'ratelimit-remaining': '0', 'ratelimit-reset': wait, 'retry-after': wait };
  if (fault.status === 429) {
    const message = 'Too many requests: asked for by a fault switch.';
    return refusalAnswer(new MailRefusal(429, 'rate_limit_exceeded', message), limits);
  }
  const message = 'An unexpected error occurred: asked for by a fault switch.';
  return refusalAnswer(new MailRefusal(fault.status, 'internal_server_error', message), { 'retry-after': wait });
}

async function answerOnce(
  world: World,
  ledger: AnswerLedger,
  request: FakeRequest,
  strike: Strike,
  key: string,
): Promise<FakeResponse> {
  if (key.length < 1 || key.length > LONGEST_KEY) {
    throw new MailRefusal(
      400,
      'invalid_idempotency_key',
      `Idempotency keys, if present, must have between 1 and ${LONGEST_KEY} characters.`,
    );
  }
  const seconds = Date.now() / 1000;
  const verdict = ledger.begin(key, request, seconds);
  if (verdict.kind === 'replay') return verdict.answer;
  if (verdict.kind === 'in-progress') {
    throw new MailRefusal(
      409,
      'concurrent_idempotent_requests',
      'Another request with this idempotency key is being worked on. Try again later.',
    );
  }
  if (verdict.kind === 'other-request') {
    throw new MailRefusal(
      409,
      'invalid_idempotent_request',
      'This idempotency key was used with another payload. Change the key or the payload.',
    );
  }
  try {
    return await work(world, request, strike, (answer) => ledger.keep(key, request, seconds, answer));
  } finally {
    ledger.done(key);
  }
}

async function work(
  world: World,
  request: FakeRequest,
  strike: Strike,
  keep: (answer: FakeResponse) => void = () => undefined,
): Promise<FakeResponse> {
  if (strike.delayMs > 0) await new Promise((resolve) => setTimeout(resolve, strike.delayMs));
  const run = findWork(request);
  const answer = world.store.write(() => {
    const done = json(200, run(world));
    keep(done);
    return done;
  });
  world.deliveries.wake();
  return strike.error ? faultAnswer(strike.error) : answer;
}

function findWork(request: FakeRequest): Work {
  const [, room = '', id = ''] = request.url.pathname.split('/');
  const wanted = `${request.method} ${room}${id === '' ? '' : id === 'batch' ? '/batch' : '/:id'}`;
  const query = request.url.searchParams;
  const works: Record<string, Work> = {
    'POST emails': (world) => sendMail(world, readMail(readJson(request.body))),
    'POST emails/batch': (world) => {
      const permissive = request.headers['x-batch-validation'] === 'permissive';
      return sendBatch(world, readJson(request.body), !permissive);
    },
    'GET emails': (world) => listMails(world, query),
    'GET emails/:id': (world) => showMail(world, id),
    'POST webhooks': (world) => createWebhook(world, readJson(request.body)),
    'GET webhooks': (world) => {
      const { rows, more } = cut(world.tables.webhooks.newest(), query);
      return {
        object: 'list',
        has_more: more,
        data: rows.map((webhook) => without(webhook, 'signing_secret', 'object')),
      };
    },
    'GET webhooks/:id': (world) => webhookOnFile(world, id),
    'DELETE webhooks/:id': (world) => removeWebhook(world, id),
  };
  const found = works[wanted];
  if (!found || request.url.pathname.split('/').length > 3) {
    throw new MailRefusal(
      405,
      'method_not_allowed',
      `This stand-in does not know ${request.method} ${request.url.pathname}.`,
    );
  }
  return found;
}

function readJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    throw new MailRefusal(400, 'validation_error', 'The request body is not valid JSON.');
  }
}
