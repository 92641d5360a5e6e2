import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, writeFileSync } from 'node:fs';
import { LaunchProblem } from './problem';

/**
 * Installs a program from Debian's packages when we may, and otherwise says what to install.
 *
 * @param packages Debian package names
 * @param purpose what the program is needed for, to end the sentence "... is needed for"
 * @throws LaunchProblem when it cannot be installed from here
 */
export function installFromDebian(packages: string[], purpose: string): void {
  const names = packages.join(' ');
  if (!existsSync('/usr/bin/apt-get')) {
    throw new LaunchProblem(`${names} is needed for ${purpose}. Install it with your system's package manager.`);
  }
  if (process.getuid?.() !== 0) {
    throw new LaunchProblem(`${names} is needed for ${purpose}. Install it: sudo apt-get install ${names}`);
  }
  if (packages.includes('postgresql')) keepDebianClusterAway();
  for (const args of [['update'], ['install', '-y', '--no-install-recommends', ...packages]]) {
    const run = spawnSync('apt-get', ['-q', ...args], {
      env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' },
      encoding: 'utf8',
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    if (run.status !== 0 && args[0] === 'install') {
      const lastLines = `${run.stdout}${run.stderr}`.trim().split('\n').slice(-3).join('\n  ');
      throw new LaunchProblem(`Debian could not install ${names}, which is needed for ${purpose}:\n  ${lastLines}`);
    }
  }
}

/** Debian's package would make and start a database of its own; ours is the only one wanted. */
function keepDebianClusterAway(): void {
  mkdirSync('/etc/postgresql-common/createcluster.d', { recursive: true });
  writeFileSync('/etc/postgresql-common/createcluster.d/pourwright.conf', 'create_main_cluster = false\n');
}
