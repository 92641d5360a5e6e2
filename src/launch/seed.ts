import { count } from 'drizzle-orm';
import { seedDemo } from '../demo/seed';
import type { Config } from '../server/config';
import { users } from '../server/db/schema/people';
import { closeServices, createServices } from '../server/services';

/** Fills an empty database with the demo; one that holds anybody is left as it is. */
export async function seedWhenEmpty(config: Config, progress: (words: string) => void): Promise<void> {
  const services = createServices({ ...config, logLevel: 'warn' });
  try {
    const [row] = await services.db.select({ people: count() }).from(users);
    if (row && row.people > 0) return progress('it is there');
    progress('the database is empty, filling it');
    await seedDemo(services);
  } finally {
    await closeServices(services);
  }
}
