import type { ChildProcess } from 'node:child_process';
import { setTimeout as pause } from 'node:timers/promises';
import type { Config } from '../server/config';
import { endChild, hasEnded } from './child';
import { spawnScript } from './script';
import { isTaken } from './ports';
import { LaunchProblem } from './problem';

/**
 * Starts the local stand-ins for Stripe and Resend as one child and waits until both answer.
 *
 * @throws LaunchProblem when they end instead of answering
 */
export async function startFakes(config: Config): Promise<{ process: ChildProcess; stop: () => Promise<void> }> {
  const child = spawnScript('fakes/server.ts', config, 'fakes.log');
  const stop = () => endChild(child, 'SIGTERM', 5_000);
  const ports = [config.port + 1, config.port + 2];
  const deadline = Date.now() + 30_000;
  while (!(await Promise.all(ports.map(isTaken))).every(Boolean)) {
    if (hasEnded(child) || Date.now() > deadline) {
      await stop();
      throw new LaunchProblem(`The pay page and the inbox did not start; ${config.dataFolder}/fakes.log says why.`);
    }
    await pause(50);
  }
  return { process: child, stop };
}
