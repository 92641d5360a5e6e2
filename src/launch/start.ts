import { buildWhenChanged } from './build';
import { startServer } from './server-child';
import { openStudio } from './studio';
import { untilStopped } from './until-stopped';
import { welcome } from './welcome';

/** `npm start`: everything from a bare clone to the running studio, until somebody stops it. */
export async function run(): Promise<number> {
  const studio = await openStudio();
  const { config, steps, children } = studio;
  try {
    await steps.run('Building the site', buildWhenChanged);
    const server = await steps.run('Starting the web server', () => startServer(config, steps.say));
    for (const line of await welcome(config)) steps.say(line);
    const ended = await Promise.race([server.gaveUp, untilStopped(children)]);
    steps.say(ended ? `${sentence(ended)} Stopping the rest.` : 'Stopping.');
    await server.stop();
    return ended ? 1 : 0;
  } finally {
    await studio.close();
  }
}

function sentence(ended: string): string {
  return ended.endsWith('.') ? ended : `The ${ended} ended by itself.`;
}
