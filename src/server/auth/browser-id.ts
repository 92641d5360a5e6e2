import { nanoid } from 'nanoid';

export const BROWSER_COOKIE = 'pourwright-browser';

/** The browser's id when the cookie holds a well-formed one, else a new one of 126 random bits. */
export function browserIdFrom(cookie: string | undefined): { id: string; isNew: boolean } {
  return cookie && /^[\w-]{21}$/.test(cookie) ? { id: cookie, isNew: false } : { id: nanoid(), isNew: true };
}
