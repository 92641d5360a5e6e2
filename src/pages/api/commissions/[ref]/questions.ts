import type { APIRoute } from 'astro';
import { askSchema } from '../../../../commission/enquiry/checklist';
import { answer, readInput } from '../../../../server/door';
import { askQuestions } from '../../../../server/enquiry/questions';

export const prerender = false;

/** The owner asks the customer some questions. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const page = `/studio/commissions/${context.params['ref']}`;
  const input = await readInput(context, askSchema);
  const outcome = input.ok ? await askQuestions(services, user, context.params['ref'], input.value) : input;
  return answer(context, outcome, { to: `${page}#questions`, back: `${page}#ask` });
};
