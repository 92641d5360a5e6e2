import type { APIRoute } from 'astro';
import { dispatchSchema } from '../../../../commission/making/work-done';
import { answer, readInput } from '../../../../server/door';
import { dispatchCommission } from '../../../../server/making/finishing';

export const prerender = false;

/** The owner hands the parcel to the carrier. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const page = `/studio/commissions/${context.params['ref']}`;
  const input = await readInput(context, dispatchSchema);
  const outcome = input.ok ? await dispatchCommission(services, user, context.params['ref'], input.value) : input;
  return answer(context, outcome, { to: page, back: `${page}#dispatch` });
};
