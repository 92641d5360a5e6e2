import { createServer } from 'node:net';
import { existsSync, readFileSync, rmSync } from 'node:fs';
import { once } from 'node:events';
import { setTimeout as pause } from 'node:timers/promises';
import { afterEach, beforeEach, expect, it } from 'vitest';
import { freeBasePort } from '../../src/launch/ports';
import { startStudio, type StudioProcess } from '../setup/studio-process';
import { temporaryDataFolder } from '../setup/temporary-folder';

let data: { folder: string; remove: () => void };
let port: number;
const started: StudioProcess[] = [];

function start(settings: NodeJS.ProcessEnv = {}, folder = data.folder): StudioProcess {
  const studio = startStudio(port, folder, settings);
  started.push(studio);
  return studio;
}

beforeEach(async () => {
  data = temporaryDataFolder();
  port = await freeBasePort();
});

afterEach(async () => {
  for (const studio of started.splice(0)) await studio.end();
  data.remove();
});

/** Those of these processes that still run after ten seconds. */
async function leftOver(pids: number[]): Promise<number[]> {
  const alive = () =>
    pids.filter((pid) => existsSync(`/proc/${pid}`) && !readFileSync(`/proc/${pid}/stat`, 'utf8').includes(') Z '));
  for (let wait = 0; wait < 100 && alive().length > 0; wait += 1) await pause(100);
  return alive();
}

function children(pid: number): number[] {
  return readFileSync(`/proc/${pid}/task/${pid}/children`, 'utf8').trim().split(' ').filter(Boolean).map(Number);
}

it('ends ready, healthy and with the demo people named, and a SIGTERM ends every child', async () => {
  const studio = start();
  await studio.ready();
  expect(studio.output()).toContain(`Pourwright is ready: http://localhost:${port}`);
  await pause(200);
  expect(studio.output()).toMatch(/Wren Addlecombe +owner +\S+@example\.org/);
  expect(studio.output()).toContain(`http://localhost:${port + 2}`);
  const health = await fetch(`${studio.url}/health`);
  expect(health.status).toBe(200);
  expect(await health.json()).toMatchObject({ ok: true, database: 'there', versions: { node: process.versions.node } });
  const pids = children(studio.process.pid!);
  // Two fakes, the database and the web server.
  expect(pids).toHaveLength(4);
  expect(await studio.end('SIGTERM')).toBe(0);
  expect(await leftOver(pids)).toEqual([]);
  expect(readFileSync(`${data.folder}/postgres.log`, 'utf8')).toMatch(/database system is shut down\s*$/);
});

it('starts again within seconds after it was killed, and starts a killed web server again by itself', async () => {
  const first = start();
  await first.ready();
  const pids = children(first.process.pid!);
  await first.end('SIGKILL');
  const second = start();
  await second.ready();
  expect(await leftOver(pids)).toEqual([]);
  process.kill(second.serverPid(), 'SIGKILL');
  while (
    !(await fetch(`${second.url}/health`).then(
      (answer) => answer.ok,
      () => false,
    ))
  )
    await pause(100);
  expect(second.output()).toContain('The web server died; starting it again.');
});

it('says 503 while the database is away, and ends by itself since nothing can work without it', async () => {
  const studio = start();
  await studio.ready();
  const database = children(studio.process.pid!).find((pid) =>
    readFileSync(`/proc/${pid}/cmdline`, 'utf8').includes('postgres'),
  )!;
  process.kill(studio.process.pid!, 'SIGSTOP');
  process.kill(database, 'SIGINT');
  await leftOver([database]);
  const health = await fetch(`${studio.url}/health`);
  expect(health.status).toBe(503);
  expect(await health.json()).toMatchObject({ ok: false, database: 'away', mailQueue: null });
  process.kill(studio.process.pid!, 'SIGCONT');
  await once(studio.process, 'exit');
  expect(studio.process.exitCode).toBe(1);
  expect(studio.output()).toContain('The database ended by itself.');
});

it('says which port is taken and what to do', async () => {
  const squatter = createServer().listen(port + 2, '127.0.0.1');
  await once(squatter, 'listening');
  const studio = start();
  await once(studio.process, 'exit');
  squatter.close();
  expect(studio.process.exitCode).toBe(1);
  expect(studio.output()).toContain(`Port ${port + 2}, needed for the inbox, is used by another program.`);
  expect(studio.output()).toContain(`PORT=${port + 100} npm start`);
});

it('refuses a second start on the same data folder, and one in a folder it may not write', async () => {
  const first = start();
  await first.ready();
  const second = start();
  await once(second.process, 'exit');
  expect(second.output()).toContain(
    `Pourwright is already running from this data folder (process ${first.process.pid})`,
  );
  const third = start({}, '/dev/null/pourwright');
  await once(third.process, 'exit');
  expect(third.output()).toContain('The data folder /dev/null/pourwright cannot be written');
});

it('says what a broken database said, and what to do', async () => {
  const first = start();
  await first.ready();
  await first.end();
  rmSync(`${data.folder}/postgres/global/pg_control`);
  const second = start();
  await once(second.process, 'exit');
  expect(second.process.exitCode).toBe(1);
  expect(second.output()).toMatch(/The database in .* does not start\. It said:[^]*pg_control/);
  expect(second.output()).toContain('move the data folder away and start again');
});

it('refuses settings that contradict each other, in words and without a stack', async () => {
  const studio = start({ STRIPE_SECRET_KEY: 'sk_live_1' });
  await once(studio.process, 'exit');
  expect(studio.process.exitCode).toBe(1);
  expect(studio.output()).toContain('STRIPE_SECRET_KEY is set, so this is a studio with real services');
  expect(studio.output()).not.toMatch(/\bat .*\.ts:/);
});
