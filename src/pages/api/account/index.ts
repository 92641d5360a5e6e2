import type { APIRoute } from 'astro';
import { accountSchema, updateAccount } from '../../../server/people/account';
import { answer, readInput } from '../../../server/door';

export const prerender = false;

/** Changes one's own name and telephone number. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const input = await readInput(context, accountSchema);
  const outcome = input.ok ? await updateAccount(services, user, input.value) : input;
  return answer(context, outcome, { to: '/account?saved=yes', back: '/account' });
};
