import type { Role } from '../../commission/permissions';

const ELSEWHERE = 'http://pages.invalid';

/**
 * The page to go to after signing in, from whatever a link or form carried: a path on this site, or `/` for anything
 * that is none (another site, `//host`, a backslash, a control character). Blank stays blank: go to the role's own page.
 */
export function safeNext(wanted: string | null | undefined): string {
  if (!wanted) return '';
  if (!wanted.startsWith('/') || wanted.length > 500 || /[\\\p{Cc}]/u.test(wanted)) return '/';
  if (!URL.canParse(wanted, ELSEWHERE)) return '/';
  const url = new URL(wanted, ELSEWHERE);
  const isPage = url.origin === ELSEWHERE && !/^\/(?:\/|api\/|sign-)/.test(url.pathname);
  return isPage ? `${url.pathname}${url.search}${url.hash}` : '/';
}

/** Each role's own first page. */
export const HOME: Record<Role, string> = {
  customer: '/commissions',
  maker: '/bench',
  owner: '/studio',
  bookkeeper: '/studio/money',
};
