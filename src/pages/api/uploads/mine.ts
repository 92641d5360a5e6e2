import type { APIRoute } from 'astro';
import { json } from '../../../server/door';
import { listUnusedUploads } from '../../../server/uploads/list-uploads';

export const prerender = false;

/** The files this browser sent and has not yet put with an enquiry. */
export const GET: APIRoute = async ({ locals }) =>
  json({ ok: true, files: await listUnusedUploads(locals.services, locals.browserId) });
