import type { APIContext, APIRoute } from 'astro';
import { AstroAuth } from 'auth-astro/server';
import { refuse } from '../../../commission/problem';
import { AUTH_PATH, authConfig } from '../../../server/auth/auth-config';
import { jsonProblem } from '../../../server/door';

export const prerender = false;

/**
 * The public face of Auth.js. `signin` and `callback` are not among it: mails are asked for at /api/sign-in, and a
 * mailed token is spent by a press at /api/sign-in/spend, never by a GET that a mail scanner could make.
 */
const PUBLIC = { GET: ['session', 'csrf'], POST: ['signout'] };

export const GET: APIRoute = (context) => answerAs('GET', context);
export const POST: APIRoute = (context) => answerAs('POST', context);

async function answerAs(method: 'GET' | 'POST', context: APIContext): Promise<Response> {
  const { config, db, log } = context.locals.services;
  if (!PUBLIC[method].includes(context.params['auth'] ?? '')) {
    return jsonProblem(refuse('not-found', 'There is nothing at this address. To sign in, go to /sign-in.').problem);
  }
  const handlers = AstroAuth({
    ...authConfig(config, db, { onError: (error) => log.warn({ err: error }, 'Auth.js refused a request') }),
    prefix: AUTH_PATH,
  });
  const response = await handlers[method](atPublicUrl(context, config.publicUrl));
  // A copy, because redirects of Auth.js have headers that the middleware could not add to.
  return response ? new Response(response.body, { status: response.status, headers: response.headers }) : notHere();
}

function notHere(): Response {
  return jsonProblem(refuse('not-found', 'There is nothing at this address.').problem);
}

/** The same request at the studio's own address, so that a Host header decides nothing. */
function atPublicUrl(context: APIContext, publicUrl: string): APIContext {
  const { pathname, search } = context.url;
  const request = new Request(`${publicUrl}${pathname}${search}`, context.request);
  return Object.create(context, { request: { value: request } }) as APIContext;
}
