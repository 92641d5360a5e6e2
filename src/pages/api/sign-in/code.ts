import type { APIRoute } from 'astro';
import { done } from '../../../commission/problem';
import { keepSession, sessionTokenOf, visitorOf } from '../../../server/auth/door-cookies';
import { answer, readInput } from '../../../server/door';
import { codeFromSchema, codeSchema, spendCode } from '../../../server/people/sign-in-spend';

export const prerender = false;

/** Signs in by address and code, on whatever device. */
export const POST: APIRoute = async (context) => {
  const { services } = context.locals;
  const input = await readInput(context, codeSchema);
  const spent = input.ok
    ? await spendCode(services, visitorOf(context), input.value, sessionTokenOf(services.config, context))
    : input;
  if (spent.ok) keepSession(services.config, context, spent.value);
  const outcome = spent.ok ? done({ next: spent.value.next }) : spent;
  const from = await readInput(context, codeFromSchema);
  const back = from.ok && from.value.enquiry ? `/price/sent?ref=${from.value.enquiry}` : '/sign-in/code';
  return answer(context, outcome, { to: ({ next }) => next, back });
};
