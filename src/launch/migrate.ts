import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate } from 'drizzle-orm/node-postgres/migrator';
import { runMigrations as prepareJobQueue } from 'graphile-worker';
import pg from 'pg';

/** Any number of its own: whoever holds it changes the tables, everybody else waits. */
const MIGRATION_LOCK = 7_306_851;

/**
 * Brings the database's tables and its job queue up to what this version of the program needs.
 * Two servers that start at once do it one after the other.
 *
 * @param migrationsFolder the folder of generated SQL files, `drizzle/`
 */
export async function migrateDatabase(url: string, migrationsFolder: string): Promise<void> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    await client.query('select pg_advisory_lock($1)', [MIGRATION_LOCK]);
    await migrate(drizzle(client), { migrationsFolder });
    await prepareJobQueue({ connectionString: url });
  } finally {
    await client.end();
  }
}
