import { execFileSync, spawnSync } from 'node:child_process';
import { createHash, randomBytes } from 'node:crypto';
import {
  chownSync,
  existsSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  renameSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { installFromDebian } from './debian';
import { LaunchProblem } from './problem';

/** The account the database runs as: PostgreSQL refuses root, so root hands it to Debian's own account. */
export interface Account {
  uid: number;
  gid: number;
}

/** The folder of PostgreSQL's programs, of version `major` or the newest; installs them when there are none. */
export function postgresPrograms(major?: string): string {
  const found = newestPrograms(major);
  if (found) return found;
  if (major) {
    throw new LaunchProblem(
      `The database in this data folder was made by PostgreSQL ${major}, which is not installed. ` +
        `Install postgresql-${major}, or move the data folder away to begin anew.`,
    );
  }
  installFromDebian(['postgresql'], 'the database');
  const installed = newestPrograms();
  if (!installed) throw new LaunchProblem('PostgreSQL was installed, but /usr/lib/postgresql holds no server.');
  return installed;
}

function newestPrograms(major?: string): string | undefined {
  const root = '/usr/lib/postgresql';
  const versions = existsSync(root) ? readdirSync(root).sort((a, b) => Number(b) - Number(a)) : [];
  return versions
    .filter((version) => !major || version === major)
    .map((version) => join(root, version, 'bin'))
    .find((folder) => existsSync(join(folder, 'initdb')));
}

/** The account to run the database as; undefined means our own. */
export function databaseAccount(): Account | undefined {
  if (process.getuid?.() !== 0) return undefined;
  const line = readFileSync('/etc/passwd', 'utf8').match(/^postgres:[^:]*:(\d+):(\d+):/m);
  if (!line) throw new LaunchProblem('There is no account "postgres" on this machine; install Debian\'s postgresql.');
  return { uid: Number(line[1]), gid: Number(line[2]) };
}

/**
 * Where the database's files go: in the data folder, or, when the database's account cannot reach
 * that (a private home folder), in a folder of its own under the system's temporary files.
 */
export function clusterFolder(
  dataFolder: string,
  account: Account | undefined,
  password: string,
): { folder: string; moved: boolean } {
  const inside = join(dataFolder, 'postgres');
  if (!account || reaches(account, dataFolder)) return { folder: inside, moved: false };
  const name = `pourwright-${createHash('sha256').update(`${dataFolder} ${password}`).digest('hex').slice(0, 12)}`;
  const outside = join(existsSync('/var/tmp') ? '/var/tmp' : tmpdir(), name);
  mkdirSync(outside, { recursive: true, mode: 0o755 });
  return { folder: join(outside, 'postgres'), moved: true };
}

function reaches(account: Account, folder: string): boolean {
  return spawnSync('/usr/bin/test', ['-x', folder], { ...account, cwd: '/' }).status === 0;
}

/** The database password of this data folder, made at its first use and readable by us alone. */
export function databasePassword(dataFolder: string): string {
  const file = join(dataFolder, 'database-password');
  if (!existsSync(file)) writeFileSync(file, randomBytes(24).toString('base64url'), { mode: 0o600 });
  return readFileSync(file, 'utf8').trim();
}

/**
 * Makes an empty cluster in `folder`. It is built beside its place and renamed, so that an
 * interrupted start leaves nothing that looks finished.
 */
export function initialiseCluster(
  programs: string,
  folder: string,
  account: Account | undefined,
  password: string,
  sync: boolean,
): void {
  const building = `${folder}.new`;
  const passwordFile = `${folder}.password`;
  rmSync(building, { recursive: true, force: true });
  mkdirSync(building, { mode: 0o700 });
  writeFileSync(passwordFile, password, { mode: 0o600 });
  if (account) [building, passwordFile].forEach((path) => chownSync(path, account.uid, account.gid));
  const args = ['-D', building, '-U', 'pourwright', '-E', 'UTF8', '--locale=C.UTF-8', '--auth=scram-sha-256'];
  try {
    execFileSync(join(programs, 'initdb'), [...args, `--pwfile=${passwordFile}`, ...(sync ? [] : ['--no-sync'])], {
      ...account,
      cwd: '/',
      stdio: ['ignore', 'pipe', 'pipe'],
    });
  } catch (error) {
    const said = error instanceof Error && 'stderr' in error ? String(error.stderr).trim() : String(error);
    throw new LaunchProblem(`PostgreSQL could not make its files in ${folder}: ${said}`);
  } finally {
    rmSync(passwordFile, { force: true });
  }
  renameSync(building, folder);
}
