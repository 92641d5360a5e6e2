import { inArray, sql } from 'drizzle-orm';
import { readFileSync } from 'node:fs';
import { mails } from './db/schema/studio';
import type { Services } from './services';

/** What whoever watches the server may know; nothing about people or money. */
export interface Health {
  ok: boolean;
  database: 'there' | 'away';
  /** Mails written and not yet handed over; null while the database is away. */
  mailQueue: number | null;
  versions: { pourwright: string; node: string; postgres: string | null };
}

const { version } = JSON.parse(readFileSync('package.json', 'utf8')) as { version: string };

/** Asks the database for its version and the length of the mail queue. A database that is away is an answer, not an error. */
export async function checkHealth(services: Services): Promise<Health> {
  const versions = { pourwright: version, node: process.versions.node, postgres: null };
  try {
    const [row] = await services.db
      .select({ waiting: sql<number>`count(*)::int`, postgres: sql<string>`current_setting('server_version')` })
      .from(mails)
      .where(inArray(mails.state, ['queued']));
    const { waiting = 0, postgres = null } = row ?? {};
    return { ok: true, database: 'there', mailQueue: waiting, versions: { ...versions, postgres } };
  } catch (error) {
    services.log.error({ err: error }, 'the database does not answer');
    return { ok: false, database: 'away', mailQueue: null, versions };
  }
}
