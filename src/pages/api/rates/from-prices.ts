import type { APIRoute } from 'astro';
import { fromPrices } from '../../../server/pricing/from-prices';

export const prerender = false;

/** Today's from-prices for the static catalogue. Open to everybody; the same for everybody, fresh for five minutes. */
export const GET: APIRoute = async ({ locals }) =>
  Response.json(await fromPrices(locals.services), { headers: { 'cache-control': 'public, max-age=300' } });
