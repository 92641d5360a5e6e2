import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { LaunchProblem } from './problem';

const STAMP = 'dist/.built-from';

/** What the built site is made from; `launch` and `demo` are not part of it. */
const SOURCES = ['src', 'public', 'astro.config.mjs', 'package-lock.json', 'tsconfig.json'];
const OUTSIDE = /^src\/(launch|demo)\//;

/** A fingerprint of everything the built site depends on, the public address included. */
export function sourcePrint(): string {
  const hash = createHash('sha256').update(process.env.PUBLIC_URL ?? '');
  for (const file of SOURCES.flatMap(filesUnder).sort()) {
    if (!OUTSIDE.test(file)) hash.update(file).update('\0').update(readFileSync(file));
  }
  return hash.digest('hex');
}

function filesUnder(path: string): string[] {
  if (!existsSync(path)) return [];
  if (!path.includes('.') || path === 'src') {
    return readdirSync(path, { recursive: true, withFileTypes: true })
      .filter((entry) => entry.isFile())
      .map((entry) => join(entry.parentPath, entry.name));
  }
  return [path];
}

/**
 * Builds the site into `dist/` when its sources changed since the last build.
 *
 * @throws LaunchProblem with the end of the build's own output when it fails
 */
export async function buildWhenChanged(progress: (words: string) => void): Promise<void> {
  const print = sourcePrint();
  if (existsSync(STAMP) && readFileSync(STAMP, 'utf8') === print) return progress('nothing changed');
  rmSync(STAMP, { force: true });
  const build = spawn(process.execPath, ['node_modules/astro/astro.js', 'build'], {
    env: { ...process.env, ASTRO_TELEMETRY_DISABLED: '1', ASTRO_DISABLE_UPDATE_CHECK: 'true' },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  const output: Buffer[] = [];
  build.stdout.on('data', (chunk: Buffer) => output.push(chunk));
  build.stderr.on('data', (chunk: Buffer) => output.push(chunk));
  const [code] = (await once(build, 'close')) as [number | null];
  if (code !== 0) {
    const said = Buffer.concat(output).toString().trim().split('\n').slice(-25).join('\n  ');
    throw new LaunchProblem(`The site could not be built. The build said:\n  ${said}`);
  }
  writeFileSync(STAMP, print);
}
