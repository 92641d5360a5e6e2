import type { APIRoute } from 'astro';
import { json, jsonProblem } from '../../../../server/door';
import { fileResponse } from '../../../../server/file-response';
import { findUpload, removeUpload } from '../../../../server/uploads/read-upload';
import { uploadPath } from '../../../../server/uploads/receive-upload';

export const prerender = false;

/** The stored file: pictures to look at, everything else to save. */
export const GET: APIRoute = async ({ params, locals }) => {
  const found = await findUpload(locals.services, locals.user, locals.browserId, params['id']);
  if (!found.ok) return jsonProblem(found.problem);
  const row = found.value;
  const as = row.kind === 'picture' ? 'inline' : 'attachment';
  return fileResponse({ path: uploadPath(row, 'file')!, type: row.mime, name: row.displayName, as });
};

/** Removes a file that belongs to no enquiry yet. */
export const DELETE: APIRoute = async ({ params, locals }) => {
  const outcome = await removeUpload(locals.services, locals.browserId, params['id']);
  return outcome.ok ? json({ ok: true, ...outcome.value }) : jsonProblem(outcome.problem);
};
