import type { APIRoute } from 'astro';
import { scrapSchema } from '../../../../commission/making/work-done';
import { answer, readInput } from '../../../../server/door';
import { benchPage } from '../../../../server/making/bench-page';
import { scrapCasting } from '../../../../server/making/scrap';

export const prerender = false;

/** A casting is given up, with its cause. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const ref = context.params['ref'];
  const input = await readInput(context, scrapSchema);
  const outcome = input.ok ? await scrapCasting(services, user, ref, input.value) : input;
  const page = benchPage(ref, context.url);
  return answer(context, outcome, { to: page, back: page });
};
