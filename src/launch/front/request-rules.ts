import type { IncomingMessage } from 'node:http';

/** Why a request is turned away before any page sees it. */
export interface Refusal {
  status: 400 | 404 | 405 | 408 | 411 | 413 | 421;
  message: string;
}

const METHODS = new Set(['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS']);

// An encoded slash, backslash, dot or percent sign, a control character, or a character that has no place in a path.
const FOREIGN_SPELLING = /%2f|%5c|%2e|%25|%[01][0-9a-f]|%7f|[\\\0-\x20\x7f#]/i;

/**
 * True when a request's path is spelled in the one way our routes are written, and its query holds no zero
 * character, which no text may. Other spellings of a guarded page (`//studio`, `/%2fstudio`, `/x/../studio`) reach routes past checks that compare paths
 * (advisories of Astro 5, GHSA list in tests/launch), so they are refused whole.
 *
 * @param target the request's target as it came: path and query
 */
export function isCanonical(target: string): boolean {
  if (target.includes('%00')) return false;
  const query = target.indexOf('?');
  const path = query < 0 ? target : target.slice(0, query);
  if (!path.startsWith('/') || path.includes('//') || /\/\.{1,2}(\/|$)/.test(path)) return false;
  if (FOREIGN_SPELLING.test(path)) return false;
  if (!path.includes('%')) return true;
  try {
    decodeURIComponent(path);
    return true;
  } catch {
    return false;
  }
}

/** Checks what can be told from the request's first line and its Host; `hosts` are the names we answer for. */
export function refuseByAddress(req: IncomingMessage, hosts: ReadonlySet<string>): Refusal | undefined {
  const target = req.url ?? '';
  if (!METHODS.has(req.method ?? '')) return { status: 405, message: `This server does not know ${req.method}.` };
  // RFC 9112 section 3.2: a request with more than one Host is answered with 400.
  if (req.rawHeaders.filter((name, index) => index % 2 === 0 && name.toLowerCase() === 'host').length > 1) {
    return { status: 400, message: 'The request names more than one host.' };
  }
  if (!hosts.has(req.headers.host ?? '')) {
    return { status: 421, message: 'This server does not answer for that host name.' };
  }
  if (!isCanonical(target)) return { status: 400, message: 'The address is not spelled the way this site spells it.' };
  // Astro's image resizer; every picture of ours is made beforehand.
  if (target.startsWith('/_image')) return { status: 404, message: 'There is nothing at this address.' };
  return undefined;
}
