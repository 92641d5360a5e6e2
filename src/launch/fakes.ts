import type { ChildProcess } from 'node:child_process';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { STUDIO } from '../commission/studio';
import type { Config } from '../server/config';
import { endChild, hasEnded } from './child';
import { isTaken } from './ports';
import { LaunchProblem } from './problem';
import { spawnScript } from './script';

export interface Fake {
  name: string;
  process: ChildProcess;
  stop: () => Promise<void>;
}

/**
 * Starts the local stand-ins for Stripe and Resend, each a child, and waits until both answer.
 *
 * @throws LaunchProblem when one ends instead of answering
 */
export async function startFakes(config: Config): Promise<Fake[]> {
  const { port, publicUrl } = config;
  const stripe = [
    ...options(config, 'stripe', port + 1, `${publicUrl}/api/stripe/webhook`, config.stripeWebhookSecret),
    ...['--public-url', `http://localhost:${port + 1}`, '--studio', STUDIO.name],
  ];
  const resend = options(config, 'resend', port + 2, `${publicUrl}/api/resend/webhook`, config.resendWebhookSecret);
  const fakes = [startFake(config, 'pay page', stripe), startFake(config, 'inbox', resend)];
  try {
    await Promise.all([waitFor(fakes[0]!, port + 1, config), waitFor(fakes[1]!, port + 2, config)]);
  } catch (error) {
    await Promise.all(fakes.map((fake) => fake.stop()));
    throw error;
  }
  return fakes;
}

function options({ dataFolder }: Config, service: string, port: number, webhook: string, secret: string): string[] {
  const state = join(dataFolder, `${service}-fake.json`);
  return [service, '--port', `${port}`, '--state', state, '--webhook', webhook, '--webhook-secret', secret];
}

function startFake(config: Config, name: string, args: string[]): Fake {
  const child = spawnScript('fakes/server.ts', config, { args, log: 'fakes.log' });
  return { name, process: child, stop: () => endChild(child, 'SIGTERM', 5_000) };
}

async function waitFor(fake: Fake, port: number, config: Config): Promise<void> {
  const deadline = Date.now() + 30_000;
  while (!(await isTaken(port))) {
    if (hasEnded(fake.process) || Date.now() > deadline) {
      throw new LaunchProblem(`The ${fake.name} did not start; ${join(config.dataFolder, 'fakes.log')} says why.`);
    }
    await pause(50);
  }
}
