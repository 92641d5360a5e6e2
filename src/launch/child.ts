import { spawn, type ChildProcess, type SpawnOptions } from 'node:child_process';
import { existsSync } from 'node:fs';
import { once } from 'node:events';

interface Account {
  uid: number;
  gid: number;
}

/**
 * Starts a child that cannot outlive this process: the kernel sends it `deathSignal` when we are
 * killed. It gets a session of its own, so that Ctrl-C reaches only us and we end the children in order.
 *
 * @param account the user to run as; only root may give one
 */
export function spawnBound(
  command: string,
  args: string[],
  options: SpawnOptions & { deathSignal?: 'INT' | 'TERM' | 'KILL'; account?: Account } = {},
): ChildProcess {
  const { deathSignal = 'TERM', account, ...rest } = options;
  if (!existsSync('/usr/bin/setpriv')) return spawn(command, args, { ...rest, ...account, detached: true });
  const become = account ? [`--reuid=${account.uid}`, `--regid=${account.gid}`, '--init-groups'] : [];
  return spawn('/usr/bin/setpriv', [`--pdeathsig=${deathSignal}`, ...become, '--', command, ...args], {
    ...rest,
    detached: true,
  });
}

/** True once the process has exited or could not be started. */
export function hasEnded(child: ChildProcess): boolean {
  return child.exitCode !== null || child.signalCode !== null || child.pid === undefined;
}

/** Asks a child to end, waits, and kills it when it has not ended after `patience` milliseconds. */
export async function endChild(child: ChildProcess, signal: NodeJS.Signals, patience: number): Promise<void> {
  if (hasEnded(child)) return;
  const exited = once(child, 'exit');
  child.kill(signal);
  const timer = setTimeout(() => child.kill('SIGKILL'), patience);
  await exited;
  clearTimeout(timer);
}
