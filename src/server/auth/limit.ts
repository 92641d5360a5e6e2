import type pg from 'pg';
import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible';
import { done, refuse, type Outcome } from '../../commission/problem';
import { keyedHash } from './secrets';

interface Allowance {
  /** So many times … */
  points: number;
  /** … within so many seconds, counted from the first. */
  seconds: number;
  /** What happened, said before "Try again in …". */
  said: string;
}

const HOUR = 3600;

/** What may be done how often, by whom `key` names: an address, a client address, a browser or a person. */
const ALLOWANCES = {
  'link-address': {
    points: 5,
    seconds: HOUR,
    said: 'Five sign-in mails were asked for this address within an hour. The newest link and code work for ten minutes.',
  },
  'link-known-browser': {
    points: 20,
    seconds: HOUR,
    said: 'Twenty sign-in mails were asked for this address within an hour. The newest link and code work for ten minutes.',
  },
  'link-client': {
    points: 60,
    seconds: HOUR,
    said: 'Very many sign-in mails were asked for from your network within an hour.',
  },
  'code-address': {
    points: 20,
    seconds: HOUR,
    said: 'Too many codes were tried for this address. The link in the mail still works.',
  },
  'code-client': {
    points: 60,
    seconds: HOUR,
    said: 'Too many codes were tried from your network. The link in the mail still works.',
  },
  enquiry: { points: 12, seconds: HOUR, said: 'Very many enquiries came from here within an hour.' },
  estimate: { points: 600, seconds: HOUR, said: 'Very many prices were asked for from here within an hour.' },
  upload: { points: 400, seconds: HOUR, said: 'Very many or very large files came from here within an hour.' },
  message: { points: 60, seconds: HOUR, said: 'Very many messages came from you within an hour.' },
} satisfies Record<string, Allowance>;

export type LimitKind = keyof typeof ALLOWANCES;

const LIMITERS = new WeakMap<pg.Pool, Map<LimitKind, RateLimiterPostgres>>();

/**
 * Counts one attempt of `kind` for `key`, or as many as `points` says, and refuses it with `too-many` when its allowance is used up. Counts are
 * kept in the database, under a keyed hash, so that neither a restart nor a second server forgets them and no
 * address can be read out of them. Every allowance fills again by itself.
 */
export async function limit(
  services: { pool: pg.Pool; config: { authSecret: string } },
  kind: LimitKind,
  key: string,
  points = 1,
): Promise<Outcome<null>> {
  try {
    await limiterOf(services.pool, kind).consume(keyedHash(services.config.authSecret, 'limit', key), points);
    return done(null);
  } catch (error) {
    if (!(error instanceof RateLimiterRes)) throw error;
    const minutes = Math.max(1, Math.ceil(error.msBeforeNext / 60_000));
    return refuse(
      'too-many',
      `${ALLOWANCES[kind].said} Try again in ${minutes} ${minutes === 1 ? 'minute' : 'minutes'}.`,
    );
  }
}

function limiterOf(pool: pg.Pool, kind: LimitKind): RateLimiterPostgres {
  const known = LIMITERS.get(pool) ?? new Map<LimitKind, RateLimiterPostgres>();
  LIMITERS.set(pool, known);
  const limiter = known.get(kind) ?? newLimiter(pool, kind);
  known.set(kind, limiter);
  return limiter;
}

function newLimiter(pool: pg.Pool, kind: LimitKind): RateLimiterPostgres {
  const { points, seconds } = ALLOWANCES[kind];
  return new RateLimiterPostgres({
    storeClient: pool,
    storeType: 'pool',
    tableName: 'rate_limits',
    tableCreated: true,
    clearExpiredByTimeout: false,
    keyPrefix: kind,
    points,
    duration: seconds,
  });
}
