import { createHash } from 'node:crypto';
import type { APIRoute } from 'astro';
import { readPublicCard } from '../../../server/pricing/estimates';

export const prerender = false;

/** What the price page reckons with. Asked for at every visit, sent again only when something in it changed. */
export const GET: APIRoute = async ({ request, locals }) => {
  const body = JSON.stringify(await readPublicCard(locals.services));
  const etag = `"${createHash('sha256').update(body).digest('base64url')}"`;
  const headers = { etag, 'cache-control': 'no-cache' };
  if (request.headers.get('if-none-match') === etag) return new Response(null, { status: 304, headers });
  return new Response(body, { headers: { ...headers, 'content-type': 'application/json; charset=utf-8' } });
};
