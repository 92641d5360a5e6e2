import type { APIRoute } from 'astro';
import { z } from 'zod';
import { signOutEverywhere } from '../../../server/people/account';
import { dropSession } from '../../../server/auth/door-cookies';
import { answer, readInput } from '../../../server/door';

export const prerender = false;

/** Ends all sessions of the person, on every device. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const input = await readInput(context, z.object({}));
  const outcome = input.ok ? await signOutEverywhere(services, user) : input;
  if (outcome.ok) dropSession(services.config, context);
  return answer(context, outcome, { to: '/', back: '/account' });
};
