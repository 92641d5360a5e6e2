import type { APIRoute } from 'astro';
import { answer, readInput } from '../../../../server/door';
import { changeRole, roleSchema } from '../../../../server/people/people';

export const prerender = false;

/** Changes a person's role and ends their sessions. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const input = await readInput(context, roleSchema);
  const outcome = input.ok ? await changeRole(services, user, context.params['id'], input.value) : input;
  return answer(context, outcome, { to: '/studio/people?done=role', back: '/studio/people' });
};
