import type { APIRoute } from 'astro';
import { answer, readInput } from '../../../../server/door';
import { decideGate, gateDecisionSchema } from '../../../../server/making/gates';

export const prerender = false;

/** The customer's answer at the pattern's gate. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const page = `/commissions/${context.params['ref']}`;
  const input = await readInput(context, gateDecisionSchema);
  const outcome = input.ok ? await decideGate(services, user, context.params['ref'], input.value) : input;
  return answer(context, outcome, { to: page, back: `${page}#gate-answer` });
};
