import type { APIRoute } from 'astro';
import { buyerTermsSchema } from '../../../../commission/enquiry/buyer-terms';
import { answer, readInput } from '../../../../server/door';
import { setBuyerTerms } from '../../../../server/enquiry/buyer-terms';

export const prerender = false;

/** The owner writes down an institution's purchase order and how many days it has to pay. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const page = `/studio/commissions/${context.params['ref']}#buyer-terms`;
  const input = await readInput(context, buyerTermsSchema);
  const outcome = input.ok ? await setBuyerTerms(services, user, context.params['ref'], input.value) : input;
  return answer(context, outcome, { to: page, back: page });
};
