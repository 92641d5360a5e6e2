import type { APIRoute } from 'astro';
import { answer, readInput } from '../../../server/door';
import { invitePerson, inviteSchema } from '../../../server/people/people';

export const prerender = false;

/** Invites somebody to work at the studio. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const input = await readInput(context, inviteSchema);
  const outcome = input.ok ? await invitePerson(services, user, input.value) : input;
  return answer(context, outcome, { to: '/studio/people?done=invited', back: '/studio/people' });
};
