import pg from 'pg';
import type { TestProject } from 'vitest/node';
import { startCluster } from '../../src/launch/cluster';
import { migrateDatabase } from '../../src/launch/migrate';
import { freeBasePort } from '../../src/launch/ports';
import { temporaryDataFolder } from './temporary-folder';

declare module 'vitest' {
  interface ProvidedContext {
    /** Connection URL of the maintenance database of the tests' own PostgreSQL. */
    clusterUrl: string;
  }
}

/** Starts a PostgreSQL for the tests alone and makes one migrated database that every test file clones. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const { folder, remove } = temporaryDataFolder();
  const cluster = await startCluster({ dataFolder: folder, port: await freeBasePort(), durable: false });
  await makeTemplate(cluster.url);
  project.provide('clusterUrl', withDatabase(cluster.url, 'postgres'));
  return async () => {
    await cluster.stop();
    remove();
  };
}

async function makeTemplate(url: string): Promise<void> {
  const client = new pg.Client({ connectionString: withDatabase(url, 'postgres') });
  await client.connect();
  await client.query('create database pourwright_template');
  await client.end();
  await migrateDatabase(withDatabase(url, 'pourwright_template'), 'drizzle');
}

function withDatabase(url: string, name: string): string {
  return Object.assign(new URL(url), { pathname: `/${name}` }).href;
}
