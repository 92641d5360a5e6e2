import type { APIRoute } from 'astro';
import { estimateRequestSchema } from '../../../commission/pricing/estimate-request';
import { visitorOf } from '../../../server/auth/door-cookies';
import { json, jsonProblem, readInput } from '../../../server/door';
import { makeEstimate } from '../../../server/pricing/estimates';

export const prerender = false;

/** The server's answer to what the price page reckons by itself. JSON always. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const input = await readInput(context, estimateRequestSchema);
  const outcome = input.ok ? await makeEstimate(services, user, visitorOf(context).client, input.value) : input;
  return outcome.ok ? json({ ok: true, value: outcome.value }) : jsonProblem(outcome.problem);
};
