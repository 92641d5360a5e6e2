import type { APIRoute } from 'astro';
import { answer } from '../../../../server/door';
import { benchPage } from '../../../../server/making/bench-page';
import { finishCommission } from '../../../../server/making/finishing';

export const prerender = false;

/** Every piece has passed inspection: tell the customer and call in the balance. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const ref = context.params['ref'];
  const outcome = await finishCommission(services, user, ref);
  const page = benchPage(ref, context.url);
  return answer(context, outcome, { to: page, back: page });
};
