import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';

/** Plain Node.js alone runs this file: it comes before any package is there. */

/**
 * Ends the program with a sentence when this Node.js is too old or too new.
 *
 * @param {string} version such as `20.20.2`
 * @returns {string | undefined} the sentence, or nothing when the version fits
 */
export function nodeProblem(version) {
  const [major = 0, minor = 0] = version.split('.').map(Number);
  if (major === 20 && minor >= 19) return undefined;
  return `Pourwright needs Node.js 20.19 or a later 20; this is ${version}. Install Node.js 20 and start again.`;
}

/**
 * Installs the packages of the lock file, unless exactly these are there already.
 *
 * @param {string} root the project's folder
 */
export function installPackages(root) {
  const stamp = join(root, 'node_modules', '.pourwright-lock');
  const wanted = createHash('sha256')
    .update(readFileSync(join(root, 'package-lock.json')))
    .digest('hex');
  if (existsSync(stamp) && readFileSync(stamp, 'utf8') === wanted) return;
  if (matchesInstalled(root)) return writeFileSync(stamp, wanted);
  const begun = performance.now();
  process.stdout.write('  Installing packages from the lock file (about a minute) …');
  const run = spawnSync('npm', ['ci', '--no-audit', '--no-fund', '--loglevel=error'], {
    cwd: root,
    encoding: 'utf8',
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  process.stdout.write(` ${((performance.now() - begun) / 1000).toFixed(1)} s\n`);
  if (run.status !== 0) {
    throw new Error(
      `npm could not install the packages:\n${run.stdout ?? ''}${run.stderr ?? run.error?.message ?? ''}`,
    );
  }
  writeFileSync(stamp, wanted);
}

/** True when `npm ci` or `npm install` put exactly the lock file's packages in place by itself. */
function matchesInstalled(root) {
  const record = join(root, 'node_modules', '.package-lock.json');
  if (!existsSync(record)) return false;
  const installed = JSON.parse(readFileSync(record, 'utf8')).packages;
  const locked = JSON.parse(readFileSync(join(root, 'package-lock.json'), 'utf8')).packages;
  return Object.entries(locked).every(
    ([path, entry]) => path === '' || entry.optional === true || installed[path]?.version === entry.version,
  );
}
