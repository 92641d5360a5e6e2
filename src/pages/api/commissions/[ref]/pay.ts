import type { APIRoute } from 'astro';
import { paySchema, startCheckout } from '../../../../server/money/checkout';
import { answer, readInput } from '../../../../server/door';

export const prerender = false;

/** Makes a Checkout page for what is owed now and sends the payer there. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const input = await readInput(context, paySchema);
  const outcome = input.ok ? await startCheckout(services, user, context.params['ref'], input.value) : input;
  return answer(context, outcome, { to: (page) => page.url, back: `/commissions/${context.params['ref']}#money` });
};
