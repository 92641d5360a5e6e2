import type { APIRoute } from 'astro';
import { answer, readInput } from '../../../server/door';
import { withdrawInvitation, withdrawSchema } from '../../../server/people/people';

export const prerender = false;

/** Takes back an invitation. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const input = await readInput(context, withdrawSchema);
  const outcome = input.ok ? await withdrawInvitation(services, user, input.value) : input;
  return answer(context, outcome, { to: '/studio/people?done=withdrawn', back: '/studio/people' });
};
