import type { APIRoute } from 'astro';
import { jsonProblem } from '../../../../server/door';
import { fileResponse } from '../../../../server/file-response';
import { findPhoto } from '../../../../server/making/photos';

export const prerender = false;

/** A photo of the work in one of its sizes. */
export const GET: APIRoute = async ({ params, locals }) => {
  const found = await findPhoto(locals.services, locals.user, params['id'], params['size']);
  if (!found.ok) return jsonProblem(found.problem);
  return fileResponse({
    path: found.value.path,
    type: 'image/webp',
    cacheControl: 'private, max-age=31536000, immutable',
  });
};
