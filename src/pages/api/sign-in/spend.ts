import type { APIRoute } from 'astro';
import { done } from '../../../commission/problem';
import { keepSession, sessionTokenOf } from '../../../server/auth/door-cookies';
import { answer, readInput } from '../../../server/door';
import { spendLink, spendSchema } from '../../../server/people/sign-in-spend';

export const prerender = false;

/** Spends a mailed link, once: the press of the confirm page's button. */
export const POST: APIRoute = async (context) => {
  const { services } = context.locals;
  const input = await readInput(context, spendSchema);
  const spent = input.ok ? await spendLink(services, input.value, sessionTokenOf(services.config, context)) : input;
  if (spent.ok) keepSession(services.config, context, spent.value);
  const outcome = spent.ok ? done({ next: spent.value.next }) : spent;
  return answer(context, outcome, { to: ({ next }) => next, back: '/sign-in' });
};
