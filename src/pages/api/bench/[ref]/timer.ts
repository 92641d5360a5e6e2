import type { APIRoute } from 'astro';
import { timerSchema } from '../../../../commission/making/work-done';
import { answer, readInput } from '../../../../server/door';
import { benchPage } from '../../../../server/making/bench-page';
import { turnTimer } from '../../../../server/making/minutes';

export const prerender = false;

/** Starts or stops the timer. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const ref = context.params['ref'];
  const input = await readInput(context, timerSchema);
  const outcome = input.ok ? await turnTimer(services, user, ref, input.value) : input;
  const page = benchPage(ref, context.url);
  return answer(context, outcome, { to: page, back: page });
};
