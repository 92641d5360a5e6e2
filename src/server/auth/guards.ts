import type { Actor, Role } from '../../commission/permissions';

type Allowed = readonly Role[];

const EVERYBODY: Allowed = ['customer', 'maker', 'owner', 'bookkeeper'];

/**
 * Who may open what, by the route's own pattern: the first line that fits decides, a route on no line is public. This
 * is the outer door only: every page and endpoint asks for its own permission as well.
 */
const GUARDED: readonly (readonly [prefix: string, allowed: Allowed])[] = [
  ['/studio/money', ['owner', 'bookkeeper']],
  ['/studio', ['owner']],
  ['/bench', ['maker', 'owner']],
  ['/commissions', EVERYBODY],
  ['/account', EVERYBODY],
  ['/api/studio/money', ['owner', 'bookkeeper']],
  ['/api/studio', ['owner']],
  ['/api/people', ['owner']],
  ['/api/bench', ['maker', 'owner']],
  ['/api/commissions', EVERYBODY],
  ['/api/account', EVERYBODY],
];

/** Says whether this person may come to a route: yes, no, or only after signing in. */
export function guard(routePattern: string, user: Actor): 'open' | 'sign-in-needed' | 'not-allowed' {
  const line = GUARDED.find(([prefix]) => routePattern === prefix || routePattern.startsWith(`${prefix}/`));
  if (!line) return 'open';
  if (!user) return 'sign-in-needed';
  return line[1].includes(user.role) ? 'open' : 'not-allowed';
}

/**
 * True when a URL's path is spelled as we link to it, and no part of it holds a zero character, which no text may.
 * `//studio`, `/\studio` and `%2f` can reach a page past checks that compare paths; the front server refuses them first,
 * and this holds where it does not stand in front.
 */
export function isCanonicalPath(requestUrl: string): boolean {
  if (requestUrl.includes('%00')) return false;
  const path = requestUrl.replace(/^[a-z]+:\/\/[^/\\?#]*/i, '').split(/[?#]/, 1)[0] ?? '';
  return !/\/\/|\\|%2f|%5c|%2e|%25/i.test(path);
}
