import type { APIRoute } from 'astro';
import { withdrawSchema } from '../../../../../../commission/pricing/desk';
import { answer, readInput } from '../../../../../../server/door';
import { withdrawQuote } from '../../../../../../server/quote/quotes';

export const prerender = false;

/** Takes back one revision that is out. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const { ref, revision } = context.params;
  const page = `/studio/commissions/${ref}`;
  const number = /^\d{1,3}$/.test(revision ?? '') ? Number(revision) : 0;
  const input = await readInput(context, withdrawSchema);
  const outcome = input.ok ? await withdrawQuote(services, user, ref, number, input.value) : input;
  return answer(context, outcome, { to: `${page}#quotes`, back: `${page}#quotes` });
};
