import type { APIRoute } from 'astro';
import { answer, readInput } from '../../../../server/door';
import { activeSchema, setActive } from '../../../../server/people/people';

export const prerender = false;

/** Lets a person sign in, or not any more. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const input = await readInput(context, activeSchema);
  const outcome = input.ok ? await setActive(services, user, context.params['id'], input.value) : input;
  return answer(context, outcome, { to: '/studio/people?done=active', back: '/studio/people' });
};
