import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { inject } from 'vitest';
import { readConfig } from '../../src/server/config';
import { createServices, type Services } from '../../src/server/services';

/** Where a running studio, its pay page and its inbox answer. */
export interface Places {
  url: string;
  payUrl: string;
  inboxUrl: string;
}

/** The places of a studio on this base port. */
export function placesOn(port: number): Places {
  const at = (offset: number) => `http://localhost:${port + offset}`;
  return { url: at(0), payUrl: at(1), inboxUrl: at(2) };
}

/** The studio that all journeys share. */
export const places = placesOn(inject('studioPort'));

/** Services of this process on a running studio's database and fakes, to set a scene and to look behind it. */
export function servicesOf(port = inject('studioPort'), dataFolder = inject('studioData')): Services {
  const password = readFileSync(join(dataFolder, 'database-password'), 'utf8').trim();
  const env = { PORT: `${port}`, POURWRIGHT_DATA: dataFolder, LOCAL_DATABASE_PASSWORD: password, LOG_LEVEL: 'silent' };
  return createServices(readConfig(env));
}

/** Asks `look` until it gives something, and gives that; throws with `what` when it never does. */
export async function until<T>(what: string, look: () => Promise<T | null | undefined | false>): Promise<T> {
  const deadline = Date.now() + 30_000;
  for (;;) {
    const found = await look();
    if (found) return found;
    if (Date.now() > deadline) throw new Error(`waited 30 s in vain for ${what}`);
    await new Promise((resolve) => setTimeout(resolve, 60));
  }
}
