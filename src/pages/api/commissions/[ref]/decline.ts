import type { APIRoute } from 'astro';
import { declineSchema } from '../../../../commission/enquiry/triage';
import { answer, readInput } from '../../../../server/door';
import { declineEnquiry } from '../../../../server/enquiry/triage';

export const prerender = false;

/** The owner declines an enquiry. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const page = `/studio/commissions/${context.params['ref']}`;
  const input = await readInput(context, declineSchema);
  const outcome = input.ok ? await declineEnquiry(services, user, context.params['ref'], input.value) : input;
  return answer(context, outcome, { to: page, back: `${page}#decline` });
};
