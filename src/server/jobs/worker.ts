import { Logger as QueueLogger, run, type Runner, type TaskList } from 'graphile-worker';
import type pg from 'pg';
import type { Logger } from 'pino';
import { queueJob } from '../outbox';
import type { Services } from '../services';
import { CLOCK_TASKS, TASKS } from './tasks';

/** Any number of its own: the session that holds it is the one worker of this database. */
const WORKER_LOCK = 7_306_852;
const LOOK_AGAIN_MS = 1_000;
const CONCURRENCY = 4;

/** A worker that can be ended. */
export interface Worker {
  /** Lets running jobs finish, then ends. Safe to call twice. */
  stop: () => Promise<void>;
}

/**
 * Starts the worker of the job queue and keeps one going until `stop`: of several processes on one database the
 * first works and the others stand by, and a lost database is waited for. The queue's own tables must be there.
 */
export async function startWorker(services: Services): Promise<Worker> {
  const stopping = new AbortController();
  let settled: () => void = () => undefined;
  const started = new Promise<void>((resolve) => (settled = resolve));
  const ended = keepWorking(services, stopping.signal, settled);
  await started;
  return {
    stop: async () => {
      stopping.abort();
      await ended;
    },
  };
}

async function keepWorking(services: Services, stopping: AbortSignal, settled: () => void): Promise<void> {
  while (!stopping.aborted) {
    try {
      await workWhileMine(services, stopping, settled);
    } catch (error) {
      services.log.error({ err: error }, 'the worker of the job queue broke off and starts again');
    }
    settled();
    await pause(LOOK_AGAIN_MS, stopping);
  }
}

/** Works as long as this process holds the lock; returns at once when another process holds it. */
async function workWhileMine(services: Services, stopping: AbortSignal, settled: () => void): Promise<void> {
  const guard = await services.pool.connect();
  const lost = new AbortController();
  guard.on('error', (error) => {
    services.log.warn({ err: error }, 'the worker lost its database connection');
    lost.abort();
  });
  try {
    if (!(await takeLock(guard))) return;
    await releaseDeadWorkers(services);
    const runner = await run({
      pgPool: services.pool,
      taskList: taskList(services),
      crontab: Object.entries(CLOCK_TASKS)
        .map(([task, when]) => `${when} ${task} ?jobKey=clock:${task}&max=5`)
        .join('\n'),
      concurrency: CONCURRENCY,
      pollInterval: LOOK_AGAIN_MS,
      noHandleSignals: true,
      logger: queueLogger(services.log),
    });
    settled();
    await runClockNow(services);
    await untilEnded(runner, AbortSignal.any([stopping, lost.signal]));
  } finally {
    guard.release(true);
  }
}

async function takeLock(guard: pg.PoolClient): Promise<boolean> {
  const { rows } = await guard.query<{ mine: boolean }>('select pg_try_advisory_lock($1) as mine', [WORKER_LOCK]);
  return rows[0]?.mine === true;
}

/** Jobs still marked as taken belong to a process that died: nobody else can hold the lock now. */
async function releaseDeadWorkers({ pool, log }: Services): Promise<void> {
  const { rows } = await pool.query<{ locked_by: string }>(
    'select distinct locked_by from graphile_worker.jobs where locked_by is not null',
  );
  if (rows.length === 0) return;
  const dead = rows.map((row) => row.locked_by);
  await pool.query('select graphile_worker.force_unlock_workers($1::text[])', [dead]);
  log.warn({ workers: dead.length }, 'jobs of a worker that died are taken up again');
}

async function runClockNow({ db }: Services): Promise<void> {
  for (const task of Object.keys(CLOCK_TASKS)) await queueJob(db, task, {}, `clock:${task}`);
}

async function untilEnded(runner: Runner, leave: AbortSignal): Promise<void> {
  const stop = () => void runner.stop();
  if (leave.aborted) stop();
  leave.addEventListener('abort', stop, { once: true });
  try {
    await runner.promise;
  } finally {
    leave.removeEventListener('abort', stop);
  }
}

function taskList(services: Services): TaskList {
  return Object.fromEntries(
    Object.entries(TASKS).map(([name, job]) => [
      name,
      async (payload, helpers) => {
        try {
          await job(services, payload);
        } catch (error) {
          services.log.error({ err: error, job: helpers.job.id, task: name, payload }, 'a job failed');
          throw error;
        }
      },
    ]),
  );
}

function queueLogger(log: Logger): QueueLogger {
  return new QueueLogger((scope) => (level, message) => {
    const about = { queue: scope };
    if (level === 'error') log.error(about, message);
    else if (level === 'warning') log.warn(about, message);
    else log.debug(about, message);
  });
}

function pause(milliseconds: number, signal: AbortSignal): Promise<void> {
  if (signal.aborted) return Promise.resolve();
  return new Promise((resolve) => {
    const done = () => {
      clearTimeout(timer);
      signal.removeEventListener('abort', done);
      resolve();
    };
    const timer = setTimeout(done, milliseconds);
    signal.addEventListener('abort', done);
  });
}
