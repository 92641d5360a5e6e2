import type { ChildProcess } from 'node:child_process';
import { readConfig, type Config } from '../server/config';
import { startCluster } from './cluster';
import { claimDataFolder } from './data-folder';
import { startFakes } from './fakes';
import { prepareRealStudio } from './first-run';
import { migrateDatabase } from './migrate';
import { waitForPorts } from './ports';
import { seedWhenEmpty } from './seed';
import { createSteps, type Steps } from './steps';

/** Everything the web server stands on, running: database, tables, demo data and fakes. */
export interface Studio {
  config: Config;
  steps: Steps;
  /** Children whose death ends the studio. */
  children: { name: string; process: ChildProcess }[];
  /** Ends what was opened, in reverse: the database last. */
  close: () => Promise<void>;
}

/**
 * Opens the studio named by `process.env`: for the demo the local database and the fakes, for real
 * services only their tables. What was opened is closed again when a later step fails.
 */
export async function openStudio(): Promise<Studio> {
  const steps = createSteps();
  const closers: (() => void | Promise<void>)[] = [];
  const close = async () => {
    for (const closer of closers.reverse().splice(0)) await closer();
  };
  const studio: Studio = { config: readConfig(), steps, children: [], close };
  try {
    closers.push(claimDataFolder(studio.config.dataFolder));
    if (studio.config.demo) await openDatabase(studio, closers);
    await steps.run('Bringing the tables up to date', () => migrateDatabase(studio.config.databaseUrl, 'drizzle'));
    if (studio.config.demo) {
      await openFakes(studio, closers);
      await steps.run('Looking for the demo', (progress) => seedWhenEmpty(studio.config, progress));
    } else {
      await steps.run('Looking for the owner and the rates', (progress) => prepareRealStudio(studio.config, progress));
    }
    return studio;
  } catch (error) {
    await close();
    throw error;
  }
}

async function openDatabase(studio: Studio, closers: (() => void | Promise<void>)[]): Promise<void> {
  const { port, databasePort, dataFolder } = studio.config;
  await studio.steps.run('Looking at the ports', () =>
    waitForPorts({ 'web server': port, 'pay page': port + 1, inbox: port + 2, database: databasePort }),
  );
  const cluster = await studio.steps.run('Starting the database', (progress) =>
    startCluster({
      dataFolder,
      port: databasePort,
      durable: process.env.POURWRIGHT_DURABLE !== 'no',
      onMoved: (folder) => progress(`its files are in ${folder}, since its account cannot reach the data folder`),
    }),
  );
  closers.push(cluster.stop);
  studio.children.push({ name: 'database', process: cluster.process });
  process.env.LOCAL_DATABASE_PASSWORD = cluster.password;
  studio.config = readConfig();
}

async function openFakes(studio: Studio, closers: (() => void | Promise<void>)[]): Promise<void> {
  const fakes = await studio.steps.run('Starting the pay page and the inbox', () => startFakes(studio.config));
  closers.push(async () => void (await Promise.all(fakes.map((fake) => fake.stop()))));
  studio.children.push(...fakes);
}
