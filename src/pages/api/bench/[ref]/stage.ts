import type { APIRoute } from 'astro';
import { stageDoneSchema } from '../../../../commission/making/work-done';
import { answer, readInput } from '../../../../server/door';
import { benchPage } from '../../../../server/making/bench-page';
import { reachStage } from '../../../../server/making/making';

export const prerender = false;

/** One piece reaches its next stage. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const ref = context.params['ref'];
  const input = await readInput(context, stageDoneSchema);
  const outcome = input.ok ? await reachStage(services, user, ref, input.value) : input;
  const page = benchPage(ref, context.url);
  return answer(context, outcome, { to: page, back: page });
};
