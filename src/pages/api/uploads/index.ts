import type { APIRoute } from 'astro';
import { visitorOf } from '../../../server/auth/door-cookies';
import { json, jsonProblem } from '../../../server/door';
import { takeUpload } from '../../../server/uploads/limit-upload';

export const prerender = false;

/** Takes one file (multipart field `file`, text field `clientId`). The answer is JSON, also when it refuses. */
export const POST: APIRoute = async (context) => {
  const { services, user, browserId } = context.locals;
  const { client } = visitorOf(context);
  const outcome = await takeUpload(services, user, { browserId, client }, context.request);
  return outcome.ok ? json({ ok: true, ...outcome.value }) : jsonProblem(outcome.problem);
};
