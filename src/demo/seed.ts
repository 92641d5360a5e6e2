import { sql } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { STUDIO } from '../commission/studio';
import type { Db } from '../server/db/client';
import { rateLimits, users } from '../server/db/schema/people';
import { rateVersions, studioSettings } from '../server/db/schema/studio';
import type { Services } from '../server/services';
import { discard } from '../server/storage/disk';
import { settleMails } from './mails';
import { demoPeople } from './people';
import { storePictures } from './pictures/store';
import { demoRates } from './rates';
import { STORIES } from './stories/all';
import { insideTransaction, openWorld, type Step, type StoredPicture } from './world';

export { demoPeople } from './people';

const LAST_NUMBER = 187;
const DAY_MS = 24 * 60 * 60_000;

/**
 * Fills an empty database with the demo studio: its people, rates, and fourteen commissions whose past is told from
 * today. The past is made by the studio's own functions, one step after the other, in one transaction.
 *
 * @throws when anybody is in the database already: the demo never mixes with a studio's own records
 */
export async function seedDemo(services: Services): Promise<void> {
  await refuseUnlessEmpty(services.db);
  const pictures = await storePictures(services.config);
  try {
    await services.db.transaction(async (tx) => {
      await refuseUnlessEmpty(tx);
      const today = services.now();
      let instant = today;
      const inside = insideTransaction(services, tx, () => instant);
      await writePeople(tx, today);
      await writeStudio(tx, today);
      const world = await openWorld(inside, pictures);
      for (const { at, step } of inOrder(today)) {
        instant = at;
        await step.run(world);
      }
      await settleMails(inside);
      await tx.execute(sql`select setval('commission_ref', ${LAST_NUMBER})`);
    });
  } catch (error) {
    await discardPictures(services, pictures);
    throw error;
  } finally {
    // What the demo's people did in an instant counts against nobody's allowance today.
    await services.db.delete(rateLimits);
  }
}

async function refuseUnlessEmpty(db: Db): Promise<void> {
  const [anybody] = await db.select({ id: users.id }).from(users).limit(1);
  if (anybody) throw new Error('The demo is for an empty database; this one holds people already.');
}

/** Every step of every story by its instant, so that receipts, mails and places in the queue run on as they would have. */
function inOrder(today: Date): { at: Date; step: Step }[] {
  const steps = STORIES.flatMap((story) => story.map((step) => ({ at: step.at(today), step })));
  const late = steps.find(({ at }) => at > today);
  if (late) throw new Error(`The demo’s past reaches into the future: ${late.at.toISOString()}`);
  return steps.sort((a, b) => a.at.getTime() - b.at.getTime());
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

/**
 * The studio's facts and rates. The rates are dated yesterday, after every pour of the demo: their counts of sound and
 * failed pours hold all of them, so that the catalogue shows its figures (thin blades 17 to 7). The scrap of MF-0181 is
 * told by that commission's own pours on top of its frozen quote, 17 to 8, and moves no price in the catalogue.
 */
async function writeStudio(db: Db, today: Date): Promise<void> {
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
  const createdAt = new Date(today.getTime() - DAY_MS);
  await db.insert(rateVersions).values({ id: uuidv7(), rates: demoRates, setBy: null, createdAt });
}

async function discardPictures({ config }: Services, pictures: ReadonlyMap<string, StoredPicture>): Promise<void> {
  for (const { files } of pictures.values())
    await discard(config.uploadsFolder, ...Object.values(files).map((file) => file.key));
}
