import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { buildWhenChanged } from './build';
import { cleanEnvironment } from './clean-environment';
import { createSteps } from './steps';

const FOLDER = 'tests/bench';

/**
 * `npm run bench`: runs each file of `tests/bench`, one after the other so that none slows another.
 * A file prints its figures and exits with 1 when one is worse than it promises.
 */
export async function run(args: string[]): Promise<number> {
  process.env = cleanEnvironment();
  await createSteps().run('Building the site', buildWhenChanged);
  let failed = 0;
  for (const file of readdirSync(FOLDER).filter((name) => name.endsWith('.bench.ts'))) {
    if (args.length > 0 && !args.some((arg) => file.includes(arg))) continue;
    const bench = spawn(process.execPath, ['--import', 'tsx', join(FOLDER, file)], {
      stdio: ['ignore', 'inherit', 'inherit'],
    });
    const [code] = (await once(bench, 'exit')) as [number | null];
    if (code !== 0) failed += 1;
  }
  return failed > 0 ? 1 : 0;
}
