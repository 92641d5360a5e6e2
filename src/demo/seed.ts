import { uuidv7 } from 'uuidv7';
import { STUDIO } from '../commission/studio';
import type { Db } from '../server/db/client';
import { users } from '../server/db/schema/people';
import { rateVersions, studioSettings } from '../server/db/schema/studio';
import type { Services } from '../server/services';
import { demoPeople } from './people';
import { demoRates } from './rates';

export { demoPeople } from './people';

/**
 * Fills an empty database with the demo studio in one transaction.
 *
 * @throws when anybody is in the database already: the demo never mixes with a studio's own records
 */
export async function seedDemo(services: Services): Promise<void> {
  await services.db.transaction(async (tx) => {
    const [anybody] = await tx.select({ id: users.id }).from(users).limit(1);
    if (anybody) throw new Error('The demo is for an empty database; this one holds people already.');
    await writePeople(tx, services.now());
    await writeStudio(tx, services.now());
  });
}

async function writePeople(db: Db, at: Date): Promise<void> {
  await db.insert(users).values(
    demoPeople.map(({ name, given, role, email, phone }) => ({
      id: uuidv7(),
      name,
      givenName: given,
      role,
      email,
      phone: phone ?? null,
      emailVerified: at,
      createdAt: at,
    })),
  );
}

async function writeStudio(db: Db, at: Date): Promise<void> {
  await db.insert(studioSettings).values({
    id: 'studio',
    settings: {
      name: STUDIO.name,
      place: STUDIO.place,
      refPrefix: 'MF',
      timeZone: 'Europe/London',
      replyTo: STUDIO.mail,
      mark: 'Reed between two dots, year and code',
      vatNumber: 'GB 000 0000 00',
      quietHours: null,
      progressEveryDays: null,
    },
  });
  await db.insert(rateVersions).values({ id: uuidv7(), rates: demoRates, setBy: null, createdAt: at });
}
