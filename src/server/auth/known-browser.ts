import { timingSafeEqual } from 'node:crypto';
import { keyedHash } from './secrets';

export const KNOWN_BROWSER_COOKIE = 'pourwright-known';

/**
 * The mark a browser gets when an address signs in on it. Whoever holds it has an allowance of sign-in mails of
 * their own, so that a stranger who uses up an address's allowance does not keep its owner out.
 */
export function knownBrowserMark(secret: string, address: string): string {
  return keyedHash(secret, 'browser', address);
}

/** True when `mark` says that this address signed in on this browser before. */
export function isKnownBrowser(secret: string, address: string, mark: string | undefined): boolean {
  const expected = Buffer.from(knownBrowserMark(secret, address));
  const given = Buffer.from(mark ?? '');
  return given.length === expected.length && timingSafeEqual(given, expected);
}
