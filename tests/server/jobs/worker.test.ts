import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import { startWorker, type Worker } from '../../../src/server/jobs/worker';
import { openPostOffice, type PostOffice } from '../mail/post-office';
import { jobs, mailRow, queueReceipt } from '../mail/rows';

let office: PostOffice;
const workers: Worker[] = [];
beforeEach(async () => (office = await openPostOffice()));
afterEach(async () => {
  await Promise.all(workers.splice(0).map((worker) => worker.stop()));
  await office.close();
});

async function work(): Promise<Worker> {
  const worker = await startWorker(office.services);
  workers.push(worker);
  return worker;
}

const state = async (id: string) => (await mailRow(office.services, id)).state;

describe('the worker', () => {
  test('sends what was queued before it started and what is queued while it runs', async () => {
    const before = await queueReceipt(office.services);
    await work();
    const during = await queueReceipt(office.services, { cause: 'M12:second' });
    await expect.poll(() => Promise.all([state(before), state(during)]), { timeout: 10_000 }).toEqual(['sent', 'sent']);
    expect(await office.inbox()).toHaveLength(2);
  });

  test('killed between the mail service’s yes and our own note: one mail, and the next worker notes it', async () => {
    const id = await queueReceipt(office.services);
    const child = spawn(
      process.execPath,
      ['--import', 'tsx', 'tests/server/jobs/dying-worker.ts', office.services.config.databaseUrl, office.url],
      { stdio: 'ignore' },
    );
    const [, signal] = (await once(child, 'exit')) as [number | null, string | null];
    expect(signal).toBe('SIGKILL');
    expect(await office.inbox()).toHaveLength(1);
    expect(await state(id)).toBe('queued');
    await work();
    await expect.poll(() => state(id), { timeout: 10_000 }).toBe('sent');
    expect(await office.inbox()).toHaveLength(1);
  });

  test('of two on one database only one works; the other takes over', async () => {
    const first = await work();
    await work();
    const { rows } = await office.services.pool.query<{ held: string }>(
      "select count(*) as held from pg_locks where locktype = 'advisory' and granted and database = (select oid from pg_database where datname = current_database())",
    );
    expect(rows[0]!.held).toBe('1');
    await first.stop();
    const id = await queueReceipt(office.services);
    await expect.poll(() => state(id), { timeout: 10_000 }).toBe('sent');
  });

  test('goes on after its database connections were cut', async () => {
    // The queue's own code prints a trace when one of its queries was cut short; whether one was is chance.
    vi.spyOn(console, 'trace').mockImplementation(() => undefined);
    await work();
    await office.services.pool.query(
      "select pg_terminate_backend(pid) from pg_stat_activity where datname = current_database() and application_name = 'pourwright worker'",
    );
    const id = await queueReceipt(office.services);
    await expect.poll(() => state(id), { timeout: 20_000 }).toBe('sent');
  });

  test('looks at the clock at its start and leaves nothing waiting', async () => {
    await work();
    await expect.poll(() => jobs(office.services), { timeout: 10_000 }).toEqual([]);
  });
});
