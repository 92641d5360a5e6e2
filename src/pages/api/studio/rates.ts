import type { APIRoute } from 'astro';
import { ratesFormSchema } from '../../../commission/pricing/rates-form';
import { answer, readInput } from '../../../server/door';
import { setRates } from '../../../server/pricing/rates';

export const prerender = false;

/** Puts a new version of the studio's rates in force. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const input = await readInput(context, ratesFormSchema);
  const outcome = input.ok ? await setRates(services, user, input.value) : input;
  return answer(context, outcome, { to: '/studio/rates?saved=1', back: '/studio/rates' });
};
