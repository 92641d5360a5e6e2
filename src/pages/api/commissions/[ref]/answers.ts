import type { APIRoute } from 'astro';
import { answersSchema } from '../../../../commission/enquiry/checklist';
import { answer, readInput } from '../../../../server/door';
import { answerQuestions } from '../../../../server/enquiry/questions';

export const prerender = false;

/** The customer answers; what is incomplete is kept. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const page = `/commissions/${context.params['ref']}`;
  const input = await readInput(context, answersSchema);
  const outcome = input.ok ? await answerQuestions(services, user, context.params['ref'], input.value) : input;
  return answer(context, outcome, { to: `${page}#questions`, back: `${page}#questions` });
};
