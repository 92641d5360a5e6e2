import type { APIRoute } from 'astro';
import { rememberAsked, visitorOf } from '../../../server/auth/door-cookies';
import { answer, readInput } from '../../../server/door';
import { requestSignIn, signInSchema } from '../../../server/people/sign-in';

export const prerender = false;

/** Mails a link and a code; the answer is the same for every address. */
export const POST: APIRoute = async (context) => {
  const { services } = context.locals;
  const input = await readInput(context, signInSchema);
  const outcome = input.ok ? await requestSignIn(services, visitorOf(context), input.value) : input;
  if (input.ok && outcome.ok) rememberAsked(services.config, context, input.value.email);
  return answer(context, outcome, { to: '/sign-in/code', back: '/sign-in' });
};
