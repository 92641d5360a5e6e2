import type { APIRoute } from 'astro';
import { minutesSchema } from '../../../../commission/making/work-done';
import { answer, readInput } from '../../../../server/door';
import { benchPage } from '../../../../server/making/bench-page';
import { logMinutes } from '../../../../server/making/minutes';

export const prerender = false;

/** Minutes worked. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const ref = context.params['ref'];
  const input = await readInput(context, minutesSchema);
  const outcome = input.ok ? await logMinutes(services, user, ref, input.value) : input;
  const page = benchPage(ref, context.url);
  return answer(context, outcome, { to: page, back: page });
};
