import type { APIContext } from 'astro';
import type { Config } from '../config';
import { KNOWN_BROWSER_COOKIE, knownBrowserMark } from './known-browser';
import { sessionCookieName, type NewCookie } from './session';
import { countedAddress, type Visitor } from './visitor';

/** Remembers for the code page which address was typed a moment ago; ten minutes, on this browser. */
export const ASKED_COOKIE = 'pourwright-asked';

type Door = Pick<APIContext, 'cookies' | 'clientAddress'>;
type Where = Pick<Config, 'authSecret' | 'publicUrl'>;

function plainCookie(config: Pick<Config, 'publicUrl'>, maxAge: number) {
  const secure = config.publicUrl.startsWith('https:');
  return { httpOnly: true, sameSite: 'lax', secure, path: '/', maxAge } as const;
}

/** Who is knocking, for the limits. */
export function visitorOf({ cookies, clientAddress }: Door): Visitor {
  return { client: countedAddress(clientAddress), knownBrowser: cookies.get(KNOWN_BROWSER_COOKIE)?.value };
}

/** The session token this browser holds, if any. */
export function sessionTokenOf(config: Pick<Config, 'publicUrl'>, { cookies }: Pick<Door, 'cookies'>) {
  return cookies.get(sessionCookieName(config))?.value;
}

/** Keeps the typed address for the code page. */
export function rememberAsked(config: Where, { cookies }: Pick<Door, 'cookies'>, email: string): void {
  cookies.set(ASKED_COOKIE, email, plainCookie(config, 600));
}

/** Hands the new session to the browser and marks it as one that this address signs in on. */
export function keepSession(
  config: Where,
  { cookies }: Pick<Door, 'cookies'>,
  signedIn: { email: string; cookies: NewCookie[] },
): void {
  for (const { name, value, options } of signedIn.cookies) cookies.set(name, value, options);
  cookies.set(
    KNOWN_BROWSER_COOKIE,
    knownBrowserMark(config.authSecret, signedIn.email),
    plainCookie(config, 31_536_000),
  );
  cookies.delete(ASKED_COOKIE, { path: '/' });
}

/** Takes the session's cookie off the browser. */
export function dropSession(config: Pick<Config, 'publicUrl'>, { cookies }: Pick<Door, 'cookies'>): void {
  const secure = config.publicUrl.startsWith('https:');
  cookies.delete(sessionCookieName(config), { path: '/', httpOnly: true, sameSite: 'lax', secure });
}
