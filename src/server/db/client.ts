import { drizzle, type NodePgDatabase, type NodePgTransaction } from 'drizzle-orm/node-postgres';
import type { ExtractTablesWithRelations } from 'drizzle-orm';
import pg from 'pg';
import { schema } from './schema';

export type Database = NodePgDatabase<typeof schema>;
export type Transaction = NodePgTransaction<typeof schema, ExtractTablesWithRelations<typeof schema>>;
/** Either; functions that only read or write rows take this. */
export type Db = Database | Transaction;

/**
 * A pool and a Drizzle client over it. An idle connection that breaks (a database restart) is
 * reported to `onError` and replaced; it does not end the process.
 */
export function openDatabase(url: string, onError: (error: Error) => void): { db: Database; pool: pg.Pool } {
  const pool = new pg.Pool({
    connectionString: url,
    max: 12,
    connectionTimeoutMillis: 5_000,
    statement_timeout: 20_000,
    idle_in_transaction_session_timeout: 20_000,
  });
  pool.on('error', onError);
  return { db: drizzle(pool, { schema }), pool };
}
