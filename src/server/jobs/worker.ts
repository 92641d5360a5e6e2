import { Logger as QueueLogger, run, type Runner, type TaskList } from 'graphile-worker';
import pg from 'pg';
import type { Logger } from 'pino';
import { queueJob } from '../outbox';
import type { Services } from '../services';
import { CLOCK_TASKS, TASKS } from './tasks';

/** Any number of its own: the session that holds it is the one worker of this database. */
const WORKER_LOCK = 7_306_852;
const LOOK_AGAIN_MS = 1_000;
const CONCURRENCY = 4;
/** Name of the worker's connections in the database's own list. */
const WORKER_NAME = 'pourwright worker';

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
  const pool = openPool(services);
  try {
    const guard = await pool.connect();
    const lost = new AbortController();
    guard.on('error', () => lost.abort());
    guard.on('end', () => lost.abort());
    try {
      if (await takeLock(guard)) await work(services, pool, AbortSignal.any([stopping, lost.signal]), settled);
    } finally {
      guard.release(true);
    }
  } finally {
    await pool.end();
  }
}

async function work(services: Services, pool: pg.Pool, leave: AbortSignal, settled: () => void): Promise<void> {
  await releaseDeadWorkers(services, pool);
  const runner = await run({
    pgPool: pool,
    taskList: taskList(services),
    crontab: Object.entries(CLOCK_TASKS)
      .map(([task, when]) => `${when} ${task} ?jobKey=clock:${task}&max=5`)
      .join('\n'),
    concurrency: CONCURRENCY,
    pollInterval: LOOK_AGAIN_MS,
    noHandleSignals: true,
    logger: queueLogger(services.log),
    // In batches the queue retries its own bookkeeping and ends in order when the database stays away; without
    // them such a failure is a rejected promise that nobody holds, which ends the process.
    preset: { worker: { completeJobBatchDelay: 0, failJobBatchDelay: 0 } },
  });
  settled();
  await runClockNow(services);
  await untilEnded(runner, leave);
}

/** The worker's own connections, so that jobs never keep a page waiting for one. */
function openPool({ config, log }: Services): pg.Pool {
  const pool = new pg.Pool({
    connectionString: config.databaseUrl,
    max: CONCURRENCY + 3,
    connectionTimeoutMillis: 15_000,
    application_name: WORKER_NAME,
  });
  const tell = (error: Error) => log.warn({ err: error }, 'a database connection of the worker broke');
  pool.on('error', tell);
  pool.on('connect', (client) => client.on('error', tell));
  return pool;
}

async function takeLock(guard: pg.PoolClient): Promise<boolean> {
  const { rows } = await guard.query<{ mine: boolean }>('select pg_try_advisory_lock($1) as mine', [WORKER_LOCK]);
  return rows[0]?.mine === true;
}

/** Jobs still marked as taken belong to a process that died: nobody else can hold the lock now. */
async function releaseDeadWorkers({ log }: Services, pool: pg.Pool): Promise<void> {
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
