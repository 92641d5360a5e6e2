import type { APIRoute } from 'astro';
import { sendQuoteSchema } from '../../../../../commission/pricing/desk';
import { answer, readInput } from '../../../../../server/door';
import { sendQuote } from '../../../../../server/quote/quotes';

export const prerender = false;

/** Freezes the saved draft as a quote revision and sends it. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const page = `/studio/commissions/${context.params['ref']}`;
  const input = await readInput(context, sendQuoteSchema);
  const outcome = input.ok ? await sendQuote(services, user, context.params['ref'], input.value) : input;
  return answer(context, outcome, { to: `${page}#quotes`, back: `${page}/quote?review=1#send` });
};
