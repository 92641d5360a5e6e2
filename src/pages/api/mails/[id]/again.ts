import type { APIRoute } from 'astro';
import { answer, readInput } from '../../../../server/door';
import { sendAgainSchema, sendMailAgain } from '../../../../server/mail/mail-log';

export const prerender = false;

/** The owner sends a mail once more. */
export const POST: APIRoute = async (context) => {
  const input = await readInput(context, sendAgainSchema);
  const { services, user } = context.locals;
  const outcome = input.ok ? await sendMailAgain(services, user, context.params['id'], input.value) : input;
  return answer(context, outcome, { to: '/studio/mail?done=again', back: '/studio/mail' });
};
