import type { TestProject } from 'vitest/node';
import { freeBasePort } from '../../src/launch/ports';
import { startStudio } from './studio-process';
import { temporaryDataFolder } from './temporary-folder';

declare module 'vitest' {
  interface ProvidedContext {
    /** Where the built studio answers; the pay page is on the next port, the inbox on the one after. */
    studioUrl: string;
    studioPort: number;
    studioData: string;
  }
}

/** Starts the whole studio once for all journeys, as `npm start` does: built pages, demo, fakes, database. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const { folder, remove } = temporaryDataFolder();
  const studio = startStudio(await freeBasePort(), folder);
  await studio.ready();
  project.provide('studioUrl', studio.url);
  project.provide('studioPort', studio.port);
  project.provide('studioData', folder);
  return async () => {
    await studio.end();
    remove();
  };
}
