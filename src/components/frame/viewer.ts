import { corner, type Viewer } from './corner';

const ROLES = ['customer', 'maker', 'owner', 'bookkeeper'];

/** Reads `{ user: { name, role } | null }` as `/api/me` answers it; anything else counts as not known. */
function readViewer(body: unknown): Viewer | null | undefined {
  if (typeof body !== 'object' || body === null || !('user' in body)) return undefined;
  const user = body.user;
  if (user === null) return null;
  if (typeof user !== 'object' || !('role' in user) || !ROLES.includes(String(user.role))) return undefined;
  return { name: null, role: user.role as Viewer['role'] };
}

/**
 * Turns the header's last link of a prerendered page into the viewer's own. The link as built, "My commissions",
 * is right for everybody (it asks for sign-in when needed), so a failed answer leaves it alone.
 */
export async function nameCorner(link: HTMLAnchorElement): Promise<void> {
  const answer = await fetch('/api/me', { headers: { accept: 'application/json' } }).catch(() => null);
  if (!answer?.ok) return;
  const viewer = readViewer(await answer.json().catch(() => undefined));
  if (viewer === undefined) return;
  const { label, href } = corner(viewer);
  link.textContent = label;
  link.setAttribute('href', href);
}
