import type { ChildProcess } from 'node:child_process';
import { closeSync, openSync } from 'node:fs';
import { join } from 'node:path';
import type { Config } from '../server/config';
import { spawnBound } from './child';

export interface ScriptOptions {
  args?: string[];
  /** Options of Node.js itself. */
  flags?: string[];
  /** File in the data folder that takes the output; without it the child writes to our terminal. */
  log?: string;
}

/** Runs a TypeScript file of ours, named by its path from the project's folder, as a child that ends with us. */
export function spawnScript(file: string, config: Config, { args = [], flags = [], log }: ScriptOptions): ChildProcess {
  const output = log ? openSync(join(config.dataFolder, log), 'a', 0o600) : undefined;
  const child = spawnBound(process.execPath, [...flags, '--import', 'tsx', file, ...args], {
    stdio: ['ignore', output ?? 'inherit', output ?? 'inherit'],
  });
  if (output !== undefined) closeSync(output);
  return child;
}
