import type { APIRoute } from 'astro';
import { jsonProblem } from '../../../../server/door';
import { fileResponse } from '../../../../server/file-response';
import { findUpload } from '../../../../server/uploads/read-upload';
import { uploadPath } from '../../../../server/uploads/receive-upload';

export const prerender = false;

/** The small picture of a stored picture. */
export const GET: APIRoute = async ({ params, locals }) => {
  const found = await findUpload(locals.services, locals.user, locals.browserId, params['id']);
  if (!found.ok) return jsonProblem(found.problem);
  const path = uploadPath(found.value, 'thumb');
  if (!path) return jsonProblem({ code: 'not-found', message: 'This file has no small picture.' });
  return fileResponse({ path, type: 'image/webp', cacheControl: 'private, max-age=86400, immutable' });
};
