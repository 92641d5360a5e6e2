import type { APIRoute } from 'astro';
import { json, jsonProblem } from '../../../server/door';
import { receiveUpload } from '../../../server/uploads/receive-upload';

export const prerender = false;

/** Takes one file (multipart field `file`, text field `clientId`). The answer is JSON, also when it refuses. */
export const POST: APIRoute = async ({ request, locals }) => {
  const outcome = await receiveUpload(locals.services, locals.user, locals.browserId, request);
  return outcome.ok ? json({ ok: true, ...outcome.value }) : jsonProblem(outcome.problem);
};
