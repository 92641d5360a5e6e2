import type { ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { hasEnded, spawnBound } from '../../src/launch/child';
import { cleanEnvironment } from '../../src/launch/clean-environment';

/** One `npm start` as a person would run it, on ports and in a data folder of its own. */
export interface StudioProcess {
  url: string;
  port: number;
  dataFolder: string;
  process: ChildProcess;
  /** Everything printed so far. */
  output: () => string;
  /** Waits for the ready line; throws with the output when the start ends without it. */
  ready: () => Promise<void>;
  /** Sends a signal and waits until the launcher is gone; gives its exit code, or null when it was killed. */
  end: (signal?: NodeJS.Signals) => Promise<number | null>;
  /** Process id of the web server, as the launcher's child. */
  serverPid: () => number;
}

/** Starts the studio. The data folder is kept, so that a second start can take it over. */
export function startStudio(port: number, dataFolder: string, settings: NodeJS.ProcessEnv = {}): StudioProcess {
  const child = spawnBound(process.execPath, ['src/launch/start.mjs'], {
    env: {
      ...cleanEnvironment(),
      PORT: `${port}`,
      POURWRIGHT_DATA: dataFolder,
      POURWRIGHT_DURABLE: 'no',
      ...settings,
    },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let output = '';
  for (const stream of [child.stdout, child.stderr]) stream?.on('data', (chunk: Buffer) => (output += chunk));
  const ready = async () => {
    while (!output.includes('Pourwright is ready:')) {
      if (hasEnded(child)) throw new Error(`the studio did not start:\n${output}`);
      await pause(50);
    }
  };
  const end = async (signal: NodeJS.Signals = 'SIGTERM') => {
    if (!hasEnded(child)) {
      child.kill(signal);
      await once(child, 'exit');
    }
    return child.exitCode;
  };
  const serverPid = () => Number(readFileSync(join(dataFolder, 'server.pid'), 'utf8'));
  return {
    url: `http://localhost:${port}`,
    port,
    dataFolder,
    process: child,
    output: () => output,
    ready,
    end,
    serverPid,
  };
}
