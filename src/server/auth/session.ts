import { Auth, raw } from '@auth/core';
import { and, eq, ne } from 'drizzle-orm';
import type { Actor, Role } from '../../commission/permissions';
import type { Config } from '../config';
import type { Database, Db } from '../db/client';
import { sessions } from '../db/schema/people';
import { authConfig, authRequest } from './auth-config';
import { hashSessionToken, newToken } from './secrets';

/** A cookie to be set; Astro's `cookies.set(name, value, options)` takes its three parts. */
export interface NewCookie {
  name: string;
  value: string;
  options: {
    httpOnly?: boolean;
    secure?: boolean;
    sameSite?: 'lax' | 'strict';
    path?: string;
    expires?: Date;
    maxAge?: number;
  };
}

interface Setting {
  config: Pick<Config, 'authSecret' | 'publicUrl'>;
  db: Database;
}

const DAY_MS = 24 * 3600 * 1000;

/** The session cookie's name: Auth.js's own, with the prefix that browsers hold to https. */
export function sessionCookieName(config: Pick<Config, 'publicUrl'>): string {
  return `${config.publicUrl.startsWith('https:') ? '__Secure-' : ''}authjs.session-token`;
}

/**
 * Who the cookies belong to, and the cookies to send back: the session's own with a later end, or an empty one
 * when the session is over. Throws when the database cannot be asked, so that nobody seems signed out by a fault.
 */
export async function readSession(
  { config, db }: Setting,
  cookie: string | null,
): Promise<{ user: Actor; cookies: NewCookie[] }> {
  if (!cookie?.includes(sessionCookieName(config))) return { user: null, cookies: [] };
  const failures: Error[] = [];
  const settings = authConfig(config, db, { onError: (error) => failures.push(error) });
  const answer = await Auth(authRequest(config.publicUrl, '/session', cookie), { ...settings, raw });
  if (failures[0]) throw failures[0];
  const session = answer.body as { user?: { id: string; role: Role; name: string | null; email: string } } | null;
  return { user: session?.user ?? null, cookies: sessionCookies(config, answer.cookies ?? []) };
}

/** Those of Auth.js's cookies that carry the session; the others belong to flows that are not in use. */
export function sessionCookies(
  config: Pick<Config, 'publicUrl'>,
  cookies: { name: string; value: string; options: object }[],
): NewCookie[] {
  return cookies.filter(({ name }) => name.startsWith(sessionCookieName(config))) as NewCookie[];
}

/** Opens a session without a mail, for the demo and for tests; returns its cookie. */
export async function openSession({ config, db }: Setting, userId: string): Promise<{ name: string; value: string }> {
  const token = newToken();
  const expires = new Date(Date.now() + 30 * DAY_MS);
  await db.insert(sessions).values({ sessionToken: hashSessionToken(token), userId, expires });
  return { name: sessionCookieName(config), value: token };
}

/** Ends one session by its cookie's value. */
export async function endSession(db: Db, token: string): Promise<void> {
  await db.delete(sessions).where(eq(sessions.sessionToken, hashSessionToken(token)));
}

/** Ends all sessions of a person at once, except the one whose cookie's value is `keep`. */
export async function endSessions(db: Db, userId: string, keep?: string): Promise<void> {
  const others = keep ? ne(sessions.sessionToken, hashSessionToken(keep)) : undefined;
  await db.delete(sessions).where(and(eq(sessions.userId, userId), others));
}
