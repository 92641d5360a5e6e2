import type pg from 'pg';
import type { Logger } from 'pino';
import { Resend } from 'resend';
import Stripe from 'stripe';
import { readConfig, type Config } from './config';
import { openDatabase, type Database } from './db/client';
import { createLog } from './log';

/** Everything a server function needs from outside itself. Built once per process, or per test. */
export interface Services {
  config: Config;
  db: Database;
  pool: pg.Pool;
  stripe: Stripe;
  resend: Resend;
  log: Logger;
  /** The instant now, in UTC; a test or the demo may give its own. */
  now: () => Date;
}

/** Builds the services from a checked configuration; `overrides` replaces any of them in tests. */
export function createServices(config: Config, overrides: Partial<Services> = {}): Services {
  const log = overrides.log ?? createLog(config.logLevel);
  const database =
    overrides.db && overrides.pool
      ? { db: overrides.db, pool: overrides.pool }
      : openDatabase(config.databaseUrl, (error) => log.warn({ err: error }, 'an idle database connection broke'));
  return {
    config,
    log,
    now: () => new Date(),
    stripe: overrides.stripe ?? openStripe(config),
    resend:
      overrides.resend ??
      new Resend(config.resendApiKey, config.resendBaseUrl ? { baseUrl: config.resendBaseUrl } : {}),
    ...database,
    ...overrides,
  };
}

function openStripe(config: Config): Stripe {
  const local = config.stripeApi;
  return new Stripe(config.stripeSecretKey, {
    telemetry: false,
    maxNetworkRetries: 2,
    timeout: 15_000,
    ...(local ? { host: local.host, port: local.port, protocol: local.protocol } : {}),
  });
}

let shared: Services | undefined;

/** The process's own services, made from `process.env` at first use. */
export function sharedServices(): Services {
  shared ??= createServices(readConfig(process.env));
  return shared;
}

/** Closes what `createServices` opened. */
export async function closeServices(services: Services): Promise<void> {
  await services.pool.end();
}
