import { randomUUID } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import pg from 'pg';
import { inject } from 'vitest';
import { readConfig } from '../../src/server/config';
import { openDatabase, type Database } from '../../src/server/db/client';
import { closeServices, createServices, type Services } from '../../src/server/services';

export interface TestDatabase {
  url: string;
  db: Database;
  pool: pg.Pool;
  /** Closes the pool and drops the database. */
  drop: () => Promise<void>;
}

/** A migrated, empty database of its own for one test file, cloned from the template. Project `server` only. */
export async function createTestDatabase(): Promise<TestDatabase> {
  const name = `test_${randomUUID().replaceAll('-', '')}`;
  await inCluster(`create database ${name} template pourwright_template`);
  const url = Object.assign(new URL(inject('clusterUrl')), { pathname: `/${name}` }).href;
  let dropping = false;
  // A connection may still be closing when its database is dropped; that it is told so is no fault.
  const { db, pool } = openDatabase(url, (error) => dropping || console.error(error));
  const drop = async () => {
    dropping = true;
    await pool.end();
    await inCluster(`drop database ${name} with (force)`);
  };
  return { url, db, pool, drop };
}

/**
 * Services on a database and a data folder of their own; both go when `drop` is called. The log is
 * silent, and Stripe and Resend point at ports where nothing listens unless `overrides` says otherwise.
 */
export async function createTestServices(
  overrides: Partial<Services> = {},
): Promise<{ services: Services; drop: () => Promise<void> }> {
  const database = await createTestDatabase();
  const dataFolder = mkdtempSync(join(tmpdir(), 'pourwright-files-'));
  const config = { ...readConfig({ POURWRIGHT_DATA: dataFolder, LOG_LEVEL: 'silent' }), databaseUrl: database.url };
  const services = createServices(config, { db: database.db, pool: database.pool, ...overrides });
  const drop = async () => {
    if (services.pool !== database.pool) await closeServices(services);
    await database.drop();
    rmSync(dataFolder, { recursive: true, force: true });
  };
  return { services, drop };
}

async function inCluster(statement: string): Promise<void> {
  const client = new pg.Client({ connectionString: inject('clusterUrl') });
  await client.connect();
  try {
    await client.query(statement);
  } finally {
    await client.end();
  }
}
