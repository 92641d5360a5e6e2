import { freshId } from '../state/ids';
import type { Strike } from '../state/faults';
import type { AnswerLedger, KeyVerdict } from '../state/idempotency';
import { json, type FakeRequest, type FakeResponse } from '../web/message';
import { chargeRoutes } from './charges';
import { customerRoutes } from './customers';
import { endpointRoutes } from './endpoints';
import { Refusal, refusalAnswer } from './errors';
import { eventRoutes } from './events';
import { expandAnswer } from './expand';
import { readForm } from './form';
import { intentRoutes } from './intents';
import { refundRoutes } from './refunds';
import { findRoute, type Route } from './routes';
import { sessionRoutes } from './sessions';
import { API_VERSION, type World } from './world';

/** The one key that is taken. */
export const STRIPE_KEY = 'sk_test_pourwright';

const ROUTES: Route[] = [
  ...customerRoutes,
  ...sessionRoutes,
  ...intentRoutes,
  ...chargeRoutes,
  ...refundRoutes,
  ...eventRoutes,
  ...endpointRoutes,
];

const LONGEST_KEY = 255;

/** Answers one API request: key, version, faults, idempotency, then the work itself, on disk before the answer. */
export async function answerApi(world: World, ledger: AnswerLedger, request: FakeRequest): Promise<FakeResponse> {
  const headers = answerHeaders(request);
  try {
    checkKey(request.headers['authorization']);
    checkVersion(request.headers['stripe-version']);
    const strike = world.faults.strike(request.url.pathname);
    if (strike.error && !strike.error.after) return faultAnswer(strike.error, headers);
    const key = request.method === 'POST' ? request.headers['idempotency-key'] : undefined;
    const answer = key
      ? await answerOnce(world, ledger, request, headers, strike, key)
      : await work(world, request, headers, strike, () => undefined);
    return strike.drop ? { ...answer, lost: true } : answer;
  } catch (error) {
    if (error instanceof Refusal) return refusalAnswer(error, headers);
    throw error;
  }
}

function answerHeaders(request: FakeRequest): Record<string, string> {
  const key = request.headers['idempotency-key'];
  return {
    'request-id': freshId('req_', 14),
    'stripe-version': request.headers['stripe-version'] ?? API_VERSION,
    ...(key ? { 'idempotency-key': key } : {}),
  };
}

function checkKey(authorization: string | undefined): void {
  const given = keyIn(authorization);
  if (given === STRIPE_KEY) return;
  if (!given) {
    throw new Refusal(
      401,
      "You did not provide an API key. Provide it in the Authorization header, using Bearer auth (such as 'Authorization: Bearer YOUR_SECRET_KEY').",
    );
  }
  const start = given.slice(0, /^(?:[a-z]+_(?:test|live)_)?/.exec(given)?.[0].length ?? 0);
  const masked = `${start}${'*'.repeat(Math.max(4, given.length - start.length - 4))}${given.slice(-4)}`;
  throw new Refusal(401, `Invalid API Key provided: ${masked}`);
}

function keyIn(authorization = ''): string {
  const [scheme, value = ''] = authorization.split(' ');
  if (scheme?.toLowerCase() === 'bearer') return value;
  if (scheme?.toLowerCase() !== 'basic') return '';
  return Buffer.from(value, 'base64').toString('utf8').split(':')[0] ?? '';
}

function checkVersion(version: string | undefined): void {
  if (version !== undefined && !/^\d{4}-\d\d-\d\d(\.[a-z]+)?$/.test(version)) {
    throw new Refusal(400, `Invalid Stripe API version: ${version}`);
  }
}

function faultAnswer(fault: NonNullable<Strike['error']>, headers: Record<string, string>): FakeResponse {
  const busy = fault.status === 429;
  const error = busy
    ? { type: 'invalid_request_error', code: 'rate_limit', message: 'Too many requests: asked for by a fault switch.' }
    : { type: 'api_error', message: 'Something went wrong on our end: asked for by a fault switch.' };
  const wait = { 'retry-after': String(fault.retryAfterSeconds), 'stripe-should-retry': 'true' };
  return json(fault.status, { error }, { ...headers, ...wait });
}

async function answerOnce(
  world: World,
  ledger: AnswerLedger,
  request: FakeRequest,
  headers: Record<string, string>,
  strike: Strike,
  key: string,
): Promise<FakeResponse> {
  if (key.length > LONGEST_KEY) {
    throw new Refusal(400, `Idempotency keys are limited to ${LONGEST_KEY} characters.`, { type: 'idempotency_error' });
  }
  const verdict = ledger.begin(key, request, Date.now() / 1000);
  if (verdict.kind !== 'fresh') return knownKey(verdict, request, headers, key);
  try {
    const keep = (answer: FakeResponse): void => ledger.keep(key, request, Date.now() / 1000, answer);
    return await work(world, request, headers, strike, keep);
  } finally {
    ledger.done(key);
  }
}

function knownKey(
  verdict: Exclude<KeyVerdict, { kind: 'fresh' }>,
  request: FakeRequest,
  headers: Record<string, string>,
  key: string,
): FakeResponse {
  if (verdict.kind === 'replay') {
    const original = verdict.answer.headers['request-id'] ?? '';
    const extra = { 'idempotent-replayed': 'true', 'original-request': original };
    return { ...verdict.answer, headers: { ...verdict.answer.headers, ...headers, ...extra } };
  }
  if (verdict.kind === 'in-progress') {
    throw new Refusal(409, `Another request with the idempotency key '${key}' is being worked on. Try again later.`, {
      type: 'idempotency_error',
      code: 'idempotency_key_in_use',
    });
  }
  const same =
    verdict.path === request.url.pathname
      ? 'parameters they were first used with'
      : `endpoint they were first used for ('${request.url.pathname}' vs '${verdict.path}')`;
  throw new Refusal(
    400,
    `Keys for idempotent requests can only be used with the same ${same}. Use another key than '${key}'.`,
    {
      type: 'idempotency_error',
    },
  );
}

/** Does the work of a request and its bookkeeping in one write. */
async function work(
  world: World,
  request: FakeRequest,
  headers: Record<string, string>,
  strike: Strike,
  keep: (answer: FakeResponse) => void,
): Promise<FakeResponse> {
  if (strike.delayMs > 0) await new Promise((resolve) => setTimeout(resolve, strike.delayMs));
  const found = findRoute(ROUTES, request.method, request.url.pathname);
  if (!found) throw new Refusal(404, `Unrecognized request URL (${request.method}: ${request.url.pathname}).`);
  const query = request.method === 'POST' ? request.body : request.url.search.slice(1);
  const { expand = [], ...input } = readForm(query);
  world.cause = { id: headers['request-id'] ?? null, idempotency_key: request.headers['idempotency-key'] ?? null };
  try {
    const answer = world.store.write(() => {
      const object = found.route.run({ world, id: found.id, input });
      const shown = json(200, expandAnswer(world, object, Array.isArray(expand) ? expand.map(String) : []), headers);
      const final = strike.error ? faultAnswer(strike.error, headers) : shown;
      keep(final);
      return final;
    });
    return answer;
  } finally {
    world.cause = null;
    world.deliveries.wake();
  }
}
