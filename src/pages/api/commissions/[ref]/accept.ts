import type { APIRoute } from 'astro';
import { acceptSchema } from '../../../../commission/enquiry/triage';
import { acceptQuote } from '../../../../server/quote/acceptance';
import { answer, readInput } from '../../../../server/door';

export const prerender = false;

/** The customer accepts the quote in force. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const ref = context.params['ref'];
  const page = `/commissions/${ref}`;
  const input = await readInput(context, acceptSchema);
  const outcome = input.ok ? await acceptQuote(services, user, ref, input.value, context.clientAddress) : input;
  const revision = input.ok ? input.value.revision : context.url.searchParams.get('revision');
  const back = /^\d{1,3}$/.test(String(revision)) ? `${page}/quote/${revision}#accept` : page;
  return answer(context, outcome, { to: `${page}#money`, back });
};
