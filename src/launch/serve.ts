import { rmSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { readConfig } from '../server/config';
import { startWorker } from '../server/jobs/worker';
import { closeServices, createServices } from '../server/services';
import { createFrontServer, type PageHandler } from './front/front-server';
import { untilStopped } from './until-stopped';

/** The web server with its job worker: one process, which the launcher starts, and which may be killed at any time. */
const config = readConfig();
const services = createServices(config);
const { handler } = (await import(pathToFileURL(resolve('dist/server/entry.mjs')).href)) as { handler: PageHandler };
const front = createFrontServer(config, services.log, resolve('dist/client'), handler);
const worker = await startWorker(services);
const pidFile = join(config.dataFolder, 'server.pid');

await new Promise<void>((resolve, reject) => {
  front.server.once('error', reject);
  front.server.listen(config.port, config.host, resolve);
});
writeFileSync(pidFile, `${process.pid}\n`);
services.log.info({ port: config.port, host: config.host }, 'serving');

await untilStopped([]);
services.log.info('stopping');
await front.drain(15_000);
await worker.stop();
await closeServices(services);
rmSync(pidFile, { force: true });
process.exit(0);
