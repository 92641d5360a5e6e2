import type { APIRoute } from 'astro';
import { messageSchema } from '../../../../commission/enquiry/triage';
import { answer, readInput } from '../../../../server/door';
import { sendMessage } from '../../../../server/enquiry/messages';

export const prerender = false;

/** A message from the customer to the studio, or back. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const ref = context.params['ref'];
  const page = user?.role === 'owner' ? `/studio/commissions/${ref}` : `/commissions/${ref}`;
  const input = await readInput(context, messageSchema);
  const outcome = input.ok ? await sendMessage(services, user, ref, input.value) : input;
  return answer(context, outcome, { to: `${page}#messages`, back: `${page}#messages` });
};
