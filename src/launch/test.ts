import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync } from 'node:fs';
import { buildWhenChanged } from './build';
import { cleanEnvironment } from './clean-environment';
import { postgresPrograms } from './cluster-files';
import { installFromDebian } from './debian';
import { createSteps } from './steps';

/**
 * `npm test`: readies what the tests stand on, then runs them all, or those named by `args` (a path,
 * `-t name`, `--project unit`), which go to Vitest as they are.
 */
export async function run(args: string[]): Promise<number> {
  const steps = createSteps();
  process.env = cleanEnvironment();
  await steps.run('Looking for PostgreSQL', () => void postgresPrograms());
  if (needsStudio(args)) {
    await steps.run('Looking for Chromium', () => {
      // A font of the system's own: without any, Chromium cannot letter what is not in the fonts we ship.
      const browser = ['chromium', 'fonts-dejavu-core'];
      if (!existsSync('/usr/bin/chromium')) installFromDebian(browser, 'the journeys through a real browser');
    });
    await steps.run('Building the site', buildWhenChanged);
  }
  const vitest = spawn(process.execPath, ['node_modules/vitest/vitest.mjs', 'run', '--maxWorkers=2', ...args], {
    stdio: ['ignore', 'inherit', 'inherit'],
  });
  const [code] = (await once(vitest, 'exit')) as [number | null];
  return code ?? 1;
}

/** Only the tests that start the whole studio need it built; a run of other kinds is spared the wait. */
function needsStudio(args: string[]): boolean {
  const project = args[args.indexOf('--project') + 1];
  const named = args.includes('--project') ? [project ?? ''] : args.filter((arg) => arg.startsWith('tests/'));
  return named.length === 0 || named.some((name) => /launch|journeys/.test(name));
}
