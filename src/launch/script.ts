import type { ChildProcess } from 'node:child_process';
import { closeSync, openSync } from 'node:fs';
import { join } from 'node:path';
import type { Config } from '../server/config';
import { spawnBound } from './child';

/**
 * Runs a TypeScript file of ours as a child that ends with us.
 *
 * @param file path from the project's folder
 * @param log file in the data folder that takes its output; without it the child writes to our terminal
 * @param flags options of Node.js itself
 */
export function spawnScript(file: string, config: Config, log?: string, flags: string[] = []): ChildProcess {
  const output = log ? openSync(join(config.dataFolder, log), 'a', 0o600) : undefined;
  const child = spawnBound(process.execPath, [...flags, '--import', 'tsx', file], {
    stdio: ['ignore', output ?? 'inherit', output ?? 'inherit'],
  });
  if (output !== undefined) closeSync(output);
  return child;
}
