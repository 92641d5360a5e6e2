import { defineMiddleware } from 'astro:middleware';
import type { APIContext } from 'astro';
import { z } from 'zod';
import type { Actor } from './commission/permissions';
import { refuse, type Problem } from './commission/problem';
import { BROWSER_COOKIE, browserIdFrom } from './server/auth/browser-id';
import { guard, isCanonicalPath } from './server/auth/guards';
import { safeNext } from './server/auth/next-path';
import { readSession } from './server/auth/session';
import { answer, FROM_ELSEWHERE, isFromElsewhere, json, jsonProblem, readInput, wantsJson } from './server/door';
import { NotedFault, noteFault } from './server/faults';
import { sharedServices, type Services } from './server/services';
import { signInPath } from './server/turn-away';

/** Routes that ask nobody who they are, and so answer while the database is away. */
const ANONYMOUS = ['/health', '/500', '/api/stripe/webhook', '/api/resend/webhook'];

/**
 * Runs before every page and endpoint that is rendered at request time: who is asking, may they come in at all, and
 * what goes with every answer. Prerendered pages pass at build time, where there is no database.
 */
export const onRequest = defineMiddleware(async (context, next) => {
  if (context.isPrerendered) return next();
  const services = sharedServices();
  if (!isCanonicalPath(context.request.url)) {
    return new Response('The address is not spelled the way this site spells it.\n', { status: 400 });
  }
  if (changesThings(context.request) && isFromElsewhere(context.request, context.url)) {
    return jsonProblem(FROM_ELSEWHERE.problem);
  }
  context.locals.services = services;
  context.locals.browserId = keepBrowserId(context, services);
  try {
    context.locals.user ??= await readUser(context, services);
    const response = (await turnBack(context)) ?? (await next());
    return uncached(response, context.locals.user);
  } catch (error) {
    const fault = noteFault(services.log, error, `${context.request.method} ${context.routePattern}`);
    if (readsPages(context.request)) throw new NotedFault(fault);
    return json({ ok: false, problem: brokenProblem(fault) }, 500);
  }
});

/** Astro's own check looks at forms alone; this one at every request that may change something, whatever its type. */
function changesThings({ method }: Request): boolean {
  return !['GET', 'HEAD', 'OPTIONS'].includes(method);
}

function keepBrowserId({ cookies, locals }: APIContext, { config }: Services): string {
  if (locals.browserId) return locals.browserId;
  const { id, isNew } = browserIdFrom(cookies.get(BROWSER_COOKIE)?.value);
  const secure = config.publicUrl.startsWith('https:');
  if (isNew) {
    cookies.set(BROWSER_COOKIE, id, { httpOnly: true, sameSite: 'lax', secure, path: '/', maxAge: 180 * 24 * 3600 });
  }
  return id;
}

/** Reads the session; opening a page, as against fetching something for one, moves its end onward. */
async function readUser({ request, routePattern, cookies }: APIContext, services: Services): Promise<Actor> {
  if (ANONYMOUS.includes(routePattern)) return null;
  const session = await readSession(services, request.headers.get('cookie'));
  const opensPage = request.method === 'GET' && readsPages(request);
  if (opensPage) for (const { name, value, options } of session.cookies) cookies.set(name, value, options);
  return session.user;
}

function readsPages(request: Request): boolean {
  return (request.headers.get('accept') ?? '').includes('text/html') && !wantsJson(request);
}

async function turnBack(context: APIContext): Promise<Response | undefined> {
  const verdict = guard(context.routePattern, context.locals.user);
  if (verdict === 'open') return undefined;
  const { problem } =
    verdict === 'sign-in-needed'
      ? refuse(
          'sign-in-needed',
          'You were not signed in when this was sent, so it was not carried out. What you typed is kept: sign in, then send it again.',
        )
      : refuse('not-allowed', 'Your role at the studio does not include this.');
  const isDoor = context.routePattern.startsWith('/api/');
  const isForm = context.request.method === 'POST' && readsPages(context.request);
  if (isDoor) return isForm ? turnBackForm(context, problem) : jsonProblem(problem);
  if (problem.code === 'not-allowed') {
    context.locals.turnedAway = problem;
    return context.rewrite('/403');
  }
  if (!['GET', 'HEAD'].includes(context.request.method)) return context.rewrite('/401');
  return new Response(null, { status: 303, headers: { location: signInPath(context.url) } });
}

/** A plain form whose sender is not signed in any more keeps what was typed; its page shows it after sign-in. */
async function turnBackForm(context: APIContext, problem: Problem): Promise<Response> {
  const isForm = (context.request.headers.get('content-type') ?? '').startsWith('application/x-www-form-urlencoded');
  if (isForm) await readInput(context, z.looseObject({}));
  return answer(context, { ok: false, problem }, { to: '/', back: pageBefore(context) });
}

function pageBefore({ request, url }: APIContext): string {
  const referer = request.headers.get('referer') ?? '';
  const from = URL.canParse(referer) ? new URL(referer) : undefined;
  const isOurs = from?.origin === url.origin && from.pathname !== '/';
  return isOurs ? safeNext(`${from.pathname}${from.search}`) : '/sign-in';
}

function brokenProblem(fault: string): Problem {
  const message =
    `Something broke on our side, and this was not carried out. Try again in a minute; ` +
    `if it stays so, write to the studio and name fault ${fault}.`;
  return { code: 'unavailable', message };
}

/** The front server adds every security header; how long an answer may be kept is known only here. */
function uncached(response: Response, user: Actor): Response {
  if (response.headers.has('cache-control')) return response;
  const headers = new Headers(response.headers);
  headers.set('cache-control', user ? 'private, no-store' : 'private, no-cache');
  return new Response(response.body, { status: response.status, statusText: response.statusText, headers });
}
