import { execFile } from 'node:child_process';
import { promisify } from 'node:util';
import { startCluster } from '../../src/launch/cluster';
import { postgresPrograms } from '../../src/launch/cluster-files';

const run = promisify(execFile);

/**
 * Fills a data folder with a copy of a running studio's database, so that a studio of a test's own starts without
 * making the demo again. Stored files and the fakes' state are not copied.
 *
 * @param source connection URL of the database to copy
 * @param port where the new folder's database may listen meanwhile
 */
export async function furnishFolder(dataFolder: string, source: string, port: number): Promise<void> {
  const cluster = await startCluster({ dataFolder, port, durable: false });
  try {
    const copy =
      '"$PROGRAMS/pg_dump" --no-owner "$SOURCE" | "$PROGRAMS/psql" -X -q -o /dev/null -v ON_ERROR_STOP=1 "$TARGET"';
    const env = { ...process.env, PROGRAMS: postgresPrograms(), SOURCE: source, TARGET: cluster.url };
    await run('bash', ['-o', 'pipefail', '-c', copy], { env });
  } finally {
    await cluster.stop();
  }
}
