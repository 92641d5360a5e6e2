import { createServer } from 'node:net';
import { setTimeout as pause } from 'node:timers/promises';
import { LaunchProblem } from './problem';

/** True when something listens on this loopback port already. */
export function isTaken(port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const server = createServer();
    server.once('error', () => resolve(true));
    server.listen({ port, host: '127.0.0.1', exclusive: true }, () => server.close(() => resolve(false)));
  });
}

/**
 * Waits until every port is free; what a killed predecessor held is let go within seconds.
 *
 * @param ports the port and what it is for
 * @throws LaunchProblem naming the port that stays taken
 */
export async function waitForPorts(ports: Record<string, number>, patience = 6_000): Promise<void> {
  const deadline = Date.now() + patience;
  const base = Math.min(...Object.values(ports));
  for (const [purpose, port] of Object.entries(ports)) {
    while (await isTaken(port)) {
      if (Date.now() > deadline) {
        throw new LaunchProblem(
          `Port ${port}, needed for the ${purpose}, is used by another program. Stop that program, ` +
            `or choose another base port: PORT=${base + 100} npm start`,
        );
      }
      await pause(150);
    }
  }
}

/**
 * A base port of which it and the next three are free just now, for tests that start the whole studio. It lies below
 * 32768, where Linux begins to take ports for outgoing connections: one of those could hold it a moment later.
 */
export async function freeBasePort(): Promise<number> {
  for (let attempt = 0; attempt < 200; attempt += 1) {
    const base = 16_000 + Math.floor(Math.random() * 4_100) * 4;
    const taken = await Promise.all([0, 1, 2, 3].map((offset) => isTaken(base + offset)));
    if (!taken.includes(true)) return base;
  }
  throw new LaunchProblem('No four neighbouring free ports were found between 16000 and 32400.');
}
