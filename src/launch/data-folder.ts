import { chmodSync, existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { LaunchProblem } from './problem';

/**
 * Makes the data folder and claims it for this process, so that two starts never share a database.
 * The claim of a process that was killed counts for nothing. What customers send lies in `uploads`, which no other
 * account of the machine may open; the folder itself must be open, since the database runs under another account.
 *
 * @returns a function that gives the claim back
 * @throws LaunchProblem when the folder cannot be written or another start holds it
 */
export function claimDataFolder(folder: string): () => void {
  const claim = join(folder, 'running.pid');
  const uploads = join(folder, 'uploads');
  const holder = readClaim(claim);
  if (holder && holder !== process.pid && isLauncher(holder)) {
    throw new LaunchProblem(
      `Pourwright is already running from this data folder (process ${holder}). Stop it first (kill ${holder}), ` +
        'or give this start a folder of its own: POURWRIGHT_DATA=.data-2 PORT=4421 npm start',
    );
  }
  try {
    if (!existsSync(folder)) mkdirSync(folder, { recursive: true, mode: 0o755 });
    mkdirSync(uploads, { recursive: true });
    chmodSync(uploads, 0o700);
    writeFileSync(claim, `${process.pid}\n`);
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error);
    throw new LaunchProblem(
      `The data folder ${folder} cannot be written (${reason}). Give this account the right to write there, ` +
        'or choose another folder: POURWRIGHT_DATA=/some/folder npm start',
    );
  }
  return () => rmSync(claim, { force: true });
}

function readClaim(file: string): number {
  return existsSync(file) ? Number(readFileSync(file, 'utf8')) : 0;
}

function isLauncher(pid: number): boolean {
  const commandLine = `/proc/${pid}/cmdline`;
  return existsSync(commandLine) && readFileSync(commandLine, 'utf8').includes('launch');
}
