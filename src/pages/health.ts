import type { APIRoute } from 'astro';
import { json } from '../server/door';
import { checkHealth } from '../server/health';

export const prerender = false;

/** `GET /health`, for whoever watches the server: 503 while the database is away. */
export const GET: APIRoute = async ({ locals }) => {
  const health = await checkHealth(locals.services);
  return json(health, health.ok ? 200 : 503);
};
