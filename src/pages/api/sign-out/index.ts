import type { APIRoute } from 'astro';
import { z } from 'zod';
import { signOut } from '../../../server/people/account';
import { dropSession, sessionTokenOf } from '../../../server/auth/door-cookies';
import { answer, readInput } from '../../../server/door';

export const prerender = false;

/** Ends this browser's session. */
export const POST: APIRoute = async (context) => {
  const { services } = context.locals;
  const input = await readInput(context, z.object({}));
  const outcome = input.ok ? await signOut(services, sessionTokenOf(services.config, context)) : input;
  if (outcome.ok) dropSession(services.config, context);
  return answer(context, outcome, { to: '/', back: '/sign-out' });
};
