import { existsSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { installPackages, nodeProblem } from './install.mjs';

/** The project's folder. */
export const root = dirname(dirname(dirname(fileURLToPath(import.meta.url))));

/**
 * Readies a bare clone for TypeScript, then hands over to `run(…)` of the named file beside this one.
 * What a person can put right is printed as a sentence; a bug is printed with its stack.
 *
 * @param {string} file such as `start.ts`
 * @param {string[]} args the command line after the program's name
 * @param {{ settings?: boolean }} [options] `settings: false` leaves the file `.env` unread
 */
export async function enter(file, args, { settings = true } = {}) {
  try {
    const problem = nodeProblem(process.versions.node);
    if (problem) throw Object.assign(new Error(problem), { name: 'LaunchProblem' });
    process.chdir(root);
    installPackages(root);
    if (settings && existsSync(join(root, '.env'))) process.loadEnvFile(join(root, '.env'));
    const { register } = await import('tsx/esm/api');
    register();
    const { run } = await import(`./${file}`);
    process.exitCode = await run(args);
  } catch (error) {
    const expected = error.name === 'LaunchProblem' || error.name === 'ConfigError';
    process.stderr.write(`\n${expected ? error.message : error.stack}\n`);
    process.exitCode = 1;
  }
}
