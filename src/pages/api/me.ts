import type { APIRoute } from 'astro';
import { json } from '../../server/door';

export const prerender = false;

/** Who is signed in, for the corner of prerendered pages: name and role, or null. */
export const GET: APIRoute = ({ locals: { user } }) =>
  json({ user: user ? { name: user.name, role: user.role } : null });
