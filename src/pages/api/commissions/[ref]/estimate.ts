import type { APIRoute } from 'astro';
import { sendEstimateSchema } from '../../../../commission/enquiry/triage';
import { answer, readInput } from '../../../../server/door';
import { sendEstimate } from '../../../../server/enquiry/triage';

export const prerender = false;

/** The owner sends an estimate range. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const page = `/studio/commissions/${context.params['ref']}`;
  const input = await readInput(context, sendEstimateSchema);
  const outcome = input.ok ? await sendEstimate(services, user, context.params['ref'], input.value) : input;
  return answer(context, outcome, { to: page, back: `${page}#estimate` });
};
