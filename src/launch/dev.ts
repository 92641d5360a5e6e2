import type { Config } from '../server/config';
import { endChild, spawnBound } from './child';
import { spawnScript } from './script';
import { openStudio } from './studio';
import { untilStopped } from './until-stopped';

/** `npm run dev`: the demo behind Astro's own development server, which reloads at each change; so does the worker. */
export async function run(): Promise<number> {
  const studio = await openStudio();
  const server = { name: 'development server', process: spawnPages() };
  const worker = { name: 'job worker', process: spawnJobs(studio.config) };
  studio.steps.say(`  Pages, with reload: ${studio.config.publicUrl}`);
  studio.steps.say(`  Inbox: http://localhost:${studio.config.port + 2}`);
  const died = await untilStopped([server, worker, ...studio.children]);
  if (died) studio.steps.say(`The ${died} ended by itself; stopping the rest.`);
  await Promise.all([server, worker].map(({ process: child }) => endChild(child, 'SIGTERM', 5_000)));
  await studio.close();
  return died ? 1 : 0;
}

function spawnPages() {
  return spawnBound(process.execPath, ['node_modules/astro/astro.js', 'dev'], {
    stdio: ['ignore', 'inherit', 'inherit'],
    env: { ...process.env, ASTRO_TELEMETRY_DISABLED: '1', ASTRO_DISABLE_UPDATE_CHECK: 'true' },
  });
}

function spawnJobs(config: Config) {
  return spawnScript('src/launch/work.ts', config, { flags: ['--watch'], log: 'worker.log' });
}
