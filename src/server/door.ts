import { and, eq, gt } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import type { z } from 'zod';
import type { Actor } from '../commission/permissions';
import { done, refuse, type Outcome, type Problem, type ProblemCode } from '../commission/problem';
import { problemFrom } from '../commission/problem-from';
import { formReturns } from './db/schema/people';
import { flawOf } from './flaws';
import type { Services } from './services';

/** What a door is given; Astro's own context fits. */
export interface DoorContext {
  request: Request;
  url: URL;
  locals: { services: Services; user: Actor; browserId: string };
}

const STATUS: Record<ProblemCode, number> = {
  invalid: 422,
  'sign-in-needed': 401,
  'not-allowed': 403,
  'not-found': 404,
  conflict: 409,
  stale: 409,
  'too-many': 429,
  'too-large': 413,
  unsupported: 415,
  unavailable: 503,
};

const READ_TWICE = new WeakMap<Request, Record<string, unknown>>();

/** True when the caller speaks JSON (an island or a test); a plain form does not. */
export function wantsJson(request: Request): boolean {
  return (
    (request.headers.get('content-type') ?? '').startsWith('application/json') ||
    (request.headers.get('accept') ?? '').startsWith('application/json')
  );
}

/** What a request from another site is told. */
export const FROM_ELSEWHERE = refuse('not-allowed', 'This request came from another site and was not carried out.');

/**
 * True when a browser says that another site's page sent this. A request without an Origin is not from a browser's
 * page: every browser names it with each POST.
 */
export function isFromElsewhere(request: Request, url: URL): boolean {
  const origin = request.headers.get('origin');
  return (origin !== null && origin !== url.origin) || request.headers.get('sec-fetch-site') === 'cross-site';
}

/** Reads a body (JSON, or a form whose repeated names become lists) and checks it against `schema`. */
export async function readInput<S extends z.ZodType>(context: DoorContext, schema: S): Promise<Outcome<z.output<S>>> {
  const raw = await readRaw(context);
  if (!raw.ok) return raw;
  const parsed = schema.safeParse(raw.value);
  if (parsed.success) return done(parsed.data);
  return { ok: false, problem: problemFrom(parsed.error) };
}

async function readRaw({ request, url }: DoorContext): Promise<Outcome<Record<string, unknown>>> {
  const known = READ_TWICE.get(request);
  if (known) return done(known);
  const type = request.headers.get('content-type') ?? '';
  if (isFromElsewhere(request, url)) return FROM_ELSEWHERE;
  try {
    const value = type.startsWith('application/json')
      ? ((await request.json()) as unknown)
      : fromForm(await request.formData());
    if (typeof value !== 'object' || value === null || Array.isArray(value)) {
      return refuse('invalid', 'The request must be one object of named values.');
    }
    const flaw = flawOf(value);
    if (flaw) return refuse('invalid', flaw);
    READ_TWICE.set(request, value as Record<string, unknown>);
    return done(value as Record<string, unknown>);
  } catch {
    return refuse('invalid', 'The request could not be read: its body is not the JSON or form it says it is.');
  }
}

/** Keeps the text of a body that was read elsewhere (one with a file in it), so that a refusal gives it back. */
export function rememberTyped(request: Request, values: Record<string, string>): void {
  READ_TWICE.set(request, values);
}

/** Of a repeated name the last value counts, unless the name ends in `[]`: then all of them, in order. */
function fromForm(form: FormData): Record<string, unknown> {
  const values = new Map<string, string | string[]>();
  for (const [name, value] of form) {
    const text = typeof value === 'string' ? value : '';
    const isList = name.endsWith('[]');
    const list = values.get(name);
    if (!isList) values.set(name, text);
    else if (Array.isArray(list)) list.push(text);
    else values.set(name, [text]);
  }
  for (const [name, list] of [...values]) if (name.endsWith('[]')) values.set(name.slice(0, -2), list);
  return Object.fromEntries(values);
}

/** Where an answer leads a plain form: on success, and back after a refusal. */
export interface Ways<T> {
  /** Page shown after success. */
  to: string | ((value: T) => string);
  /** Page with the form; it gets `?again=<id>` and reads what was typed by `takeFormReturn`. */
  back: string;
  headers?: Headers;
}

/**
 * Answers one outcome: JSON callers get the value or the problem with its status; plain forms are sent
 * on by 303, and after a refusal back to the form with everything they typed.
 */
export async function answer<T>(context: DoorContext, outcome: Outcome<T>, ways: Ways<T>): Promise<Response> {
  const headers = new Headers(ways.headers);
  if (wantsJson(context.request)) {
    const to = outcome.ok ? (typeof ways.to === 'string' ? ways.to : ways.to(outcome.value)) : undefined;
    return outcome.ok
      ? json({ ok: true, value: outcome.value, to }, 200, headers)
      : json({ ok: false, problem: outcome.problem }, STATUS[outcome.problem.code], headers);
  }
  if (outcome.ok) {
    headers.set('location', typeof ways.to === 'string' ? ways.to : ways.to(outcome.value));
    return new Response(null, { status: 303, headers });
  }
  const id = await keepTyped(context, outcome.problem);
  const back = new URL(ways.back, context.url);
  back.searchParams.set('again', id);
  headers.set('location', `${back.pathname}${back.search}${back.hash}`);
  return new Response(null, { status: 303, headers });
}

/** A JSON response that no cache keeps. */
export function json(body: unknown, status = 200, headers = new Headers()): Response {
  headers.set('content-type', 'application/json; charset=utf-8');
  headers.set('cache-control', 'no-store');
  return new Response(JSON.stringify(body), { status, headers });
}

/** A refusal as a JSON response. */
export function jsonProblem(problem: Problem): Response {
  return json({ ok: false, problem }, STATUS[problem.code]);
}

const MOST_KEPT = 200_000;

async function keepTyped({ request, locals }: DoorContext, problem: Problem): Promise<string> {
  const { services, browserId } = locals;
  const typed = READ_TWICE.get(request) ?? {};
  const texts = Object.entries(typed).filter(
    (entry): entry is [string, string | string[]] => typeof entry[1] === 'string' || Array.isArray(entry[1]),
  );
  // No form of ours comes near this; what is larger was never typed.
  const values = JSON.stringify(texts).length > MOST_KEPT ? {} : Object.fromEntries(texts);
  const id = uuidv7();
  const expiresAt = new Date(services.now().getTime() + 60 * 60_000);
  await services.db.insert(formReturns).values({ id, browserId, values, problem, expiresAt });
  return id;
}

/** What was typed and refused, for the page that shows the form again. */
export interface FormReturn {
  values: Record<string, string | string[]>;
  problem: Problem;
}

/** Reads the kept form named by `?again=`; only the browser that typed it gets it. */
export async function takeFormReturn({ url, locals }: DoorContext): Promise<FormReturn | null> {
  const id = url.searchParams.get('again');
  if (!id || !/^[0-9a-f-]{36}$/.test(id)) return null;
  const { services, browserId } = locals;
  const [row] = await services.db
    .select()
    .from(formReturns)
    .where(
      and(eq(formReturns.id, id), eq(formReturns.browserId, browserId), gt(formReturns.expiresAt, services.now())),
    );
  return row ? { values: row.values, problem: { ...row.problem, code: row.problem.code as ProblemCode } } : null;
}
