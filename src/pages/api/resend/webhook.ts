import type { APIRoute } from 'astro';
import { json, jsonProblem } from '../../../server/door';
import { recordMailEvent, verifyMailEvent } from '../../../server/mail/outcome';

export const prerender = false;

/** What became of our mails. The body is read raw, since the signature is over its bytes. */
export const POST: APIRoute = async ({ request, locals }) => {
  const { services } = locals;
  const event = verifyMailEvent(services, await request.text(), request.headers);
  if (!event.ok) {
    services.log.warn({ problem: event.problem.code }, 'a mail event with a bad signature was refused');
    return jsonProblem(event.problem);
  }
  const outcome = await recordMailEvent(services, event.value);
  services.log.info({ type: event.value.type, outcome }, 'took in a mail event');
  return json({ received: true, outcome });
};
