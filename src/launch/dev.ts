import { endChild, spawnBound } from './child';
import { openStudio } from './studio';
import { untilStopped } from './until-stopped';

/** `npm run dev`: the demo behind Astro's own development server, which reloads at each change. */
export async function run(): Promise<number> {
  const studio = await openStudio();
  const server = spawnBound(process.execPath, ['node_modules/astro/astro.js', 'dev'], {
    stdio: ['ignore', 'inherit', 'inherit'],
    env: { ...process.env, ASTRO_TELEMETRY_DISABLED: '1' },
  });
  studio.steps.say(`  Pages, with reload: ${studio.config.publicUrl}`);
  const died = await untilStopped([{ name: 'development server', process: server }, ...studio.children]);
  if (died) studio.steps.say(`The ${died} ended by itself; stopping the rest.`);
  await endChild(server, 'SIGTERM', 5_000);
  await studio.close();
  return died ? 1 : 0;
}
