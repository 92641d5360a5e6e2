import type { APIRoute } from 'astro';
import { json } from '../server/door';
import { checkHealth } from '../server/health';
import { sharedServices } from '../server/services';

export const prerender = false;

/** `GET /health`, for whoever watches the server: 503 while the database is away. */
export const GET: APIRoute = async () => {
  const health = await checkHealth(sharedServices());
  return json(health, health.ok ? 200 : 503);
};
