import type { ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import type { Config } from '../server/config';
import { endChild, hasEnded } from './child';
import { LaunchProblem } from './problem';
import { spawnScript } from './script';

const RESTARTS_PER_MINUTE = 5;

export interface ServerChild {
  /** Settles with a sentence when the server dies so often that starting it again is no use. */
  gaveUp: Promise<string>;
  /** Lets running requests finish, then ends the server. */
  stop: () => Promise<void>;
}

/**
 * Starts the web server, waits until it is healthy, and starts it again whenever it dies unasked.
 *
 * @throws LaunchProblem when it never becomes healthy
 */
export async function startServer(config: Config, say: (line: string) => void): Promise<ServerChild> {
  // The demo keeps its log in a file, so that the terminal shows what a person needs to read.
  const log = config.demo ? 'server.log' : undefined;
  const spawnServer = () => spawnScript('src/launch/serve.ts', config, { log });
  let child = spawnServer();
  let stopping = false;
  await waitUntilHealthy(child, config, log);
  const keepAlive = async (): Promise<string> => {
    const deaths: number[] = [];
    for (;;) {
      if (!hasEnded(child)) await once(child, 'exit');
      if (stopping) return 'stopped';
      deaths.push(Date.now());
      if (deaths.filter((death) => Date.now() - death < 60_000).length > RESTARTS_PER_MINUTE) {
        return `The web server died ${deaths.length} times${log ? `; ${join(config.dataFolder, log)} says why` : ''}.`;
      }
      say('The web server died; starting it again.');
      await pause(300);
      if (!stopping) child = spawnServer();
    }
  };
  const gaveUp = keepAlive();
  const stop = async () => {
    stopping = true;
    await endChild(child, 'SIGTERM', 25_000);
  };
  return { gaveUp, stop };
}

async function waitUntilHealthy(child: ChildProcess, config: Config, log?: string): Promise<void> {
  const deadline = Date.now() + 60_000;
  while (!(await answers(config))) {
    if (hasEnded(child) || Date.now() > deadline) {
      await endChild(child, 'SIGTERM', 5_000);
      const said = log
        ? readFileSync(join(config.dataFolder, log), 'utf8').trim().split('\n').slice(-12).join('\n  ')
        : '';
      throw new LaunchProblem(`The web server did not start.${said ? ` Its log ends:\n  ${said}` : ''}`);
    }
    await pause(50);
  }
}

async function answers(config: Config): Promise<boolean> {
  try {
    const host = config.host === '0.0.0.0' ? '127.0.0.1' : config.host;
    return (await fetch(`http://${host}:${config.port}/health`)).ok;
  } catch (error) {
    // Nothing listens yet: fetch has no other way to say so.
    if (error instanceof TypeError) return false;
    throw error;
  }
}
