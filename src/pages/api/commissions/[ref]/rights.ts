import type { APIRoute } from 'astro';
import { rightsSchema } from '../../../../commission/enquiry/rights';
import { answer, readInput } from '../../../../server/door';
import { recordRights } from '../../../../server/enquiry/rights';

export const prerender = false;

/** The owner writes down what was found out about the rights in the design. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const page = `/studio/commissions/${context.params['ref']}`;
  const input = await readInput(context, rightsSchema);
  const outcome = input.ok ? await recordRights(services, user, context.params['ref'], input.value) : input;
  return answer(context, outcome, { to: `${page}#rights`, back: `${page}#rights` });
};
