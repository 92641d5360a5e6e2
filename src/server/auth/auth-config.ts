import type { AuthConfig } from '@auth/core';
import type { EmailConfig } from '@auth/core/providers/email';
import type { Role } from '../../commission/permissions';
import type { Config } from '../config';
import type { Db } from '../db/client';
import { createAdapter } from './adapter';
import { newToken } from './secrets';

declare module '@auth/core/types' {
  interface User {
    role: Role;
  }
}
declare module '@auth/core/adapters' {
  interface AdapterUser {
    role: Role;
  }
}

export const AUTH_PATH = '/api/auth';
const DAY = 24 * 3600;

/** Mails are ours to queue, in the transaction of what causes them, so Auth.js is never asked to send one. */
const mailProvider: EmailConfig = {
  id: 'mail',
  type: 'email',
  name: 'Mail',
  maxAge: 600,
  sendVerificationRequest: () => {
    throw new Error('sign-in mails are queued by requestSignIn');
  },
};

/** What Auth.js logs, handed on: `onError` gets its errors, which it would otherwise print and swallow. */
export interface AuthListener {
  onError: (error: Error) => void;
}

/**
 * The settings Auth.js runs with, over a database or one transaction. Everything is given, so that nothing is taken
 * from the environment or a request's Host header.
 */
export function authConfig(
  config: Pick<Config, 'authSecret' | 'publicUrl'>,
  db: Db,
  { onError }: AuthListener,
): AuthConfig {
  return {
    basePath: AUTH_PATH,
    secret: config.authSecret,
    trustHost: true,
    useSecureCookies: config.publicUrl.startsWith('https:'),
    adapter: createAdapter(db),
    providers: [mailProvider],
    session: { strategy: 'database', maxAge: 30 * DAY, updateAge: DAY, generateSessionToken: newToken },
    pages: { signIn: '/sign-in', signOut: '/sign-out', error: '/sign-in', verifyRequest: '/sign-in/code' },
    callbacks: {
      // A new object: the one given carries the session's token, which the browser's scripts must never see.
      session: ({ session, user }) => ({
        expires: session.expires,
        user: { id: user.id, role: user.role, name: user.name ?? null, email: user.email },
      }),
      redirect: ({ baseUrl }) => baseUrl,
    },
    logger: { error: onError, warn: () => undefined, debug: () => undefined },
  };
}

/** A request to Auth.js at the studio's own address, carrying nothing of the visitor's but the cookies. */
export function authRequest(publicUrl: string, pathAndQuery: string, cookie: string | null): Request {
  return new Request(`${publicUrl}${AUTH_PATH}${pathAndQuery}`, cookie ? { headers: { cookie } } : {});
}
