import { once } from 'node:events';
import type { ChildProcess } from 'node:child_process';
import { hasEnded } from './child';

/**
 * Waits until somebody asks us to stop (Ctrl-C, SIGTERM, a closed terminal) or a child dies.
 *
 * @returns the name of the child that died, or nothing when we were asked
 */
export async function untilStopped(children: { name: string; process: ChildProcess }[]): Promise<string | undefined> {
  const asked = (['SIGINT', 'SIGTERM', 'SIGHUP'] as const).map((signal) => once(process, signal).then(() => undefined));
  const died = children.map(async ({ name, process: child }) => {
    if (!hasEnded(child)) await once(child, 'exit');
    return name;
  });
  const first = await Promise.race([...asked, ...died]);
  // From here on a second Ctrl-C must not cut the orderly end short.
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, () => undefined);
  return first;
}
