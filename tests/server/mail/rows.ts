import { eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { commissions } from '../../../src/server/db/schema/commissions';
import { mails, studioSettings } from '../../../src/server/db/schema/studio';
import { queueMail } from '../../../src/server/outbox';
import type { Services } from '../../../src/server/services';
import { SAMPLES } from './sample-letters';

/** The commission the sample letters speak of. */
export async function addCommission(services: Services, changes: Partial<typeof commissions.$inferInsert> = {}) {
  const at = services.now();
  const [row] = await services.db
    .insert(commissions)
    .values({
      id: uuidv7(),
      ref: 'MF-0181',
      deal: 'enquiry',
      email: 'isolde@example.org',
      customerName: 'Isolde Wintermere',
      title: 'Leaf-shaped sword from your file',
      alloy: 'TB88',
      family: 'thin',
      pieces: 1,
      enquiry: {},
      estimateRequest: {},
      estimate: {},
      destination: 'GB',
      createdAt: at,
      updatedAt: at,
      ...changes,
    })
    .returning();
  return row!;
}

/** Queues a receipt, which leaves at any hour; `changes` make it another. */
export async function queueReceipt(services: Services, changes: { to?: string; cause?: string; at?: Date } = {}) {
  const id = await queueMail(services.db, {
    letter: 'M12',
    to: 'isolde@example.org',
    cause: 'M12:first',
    at: services.now(),
    data: SAMPLES.M12,
    ...changes,
  });
  return id!;
}

export async function mailRow({ db }: Services, id: string) {
  const [row] = await db.select().from(mails).where(eq(mails.id, id));
  return row!;
}

/** Waiting jobs: task, key and when they run. */
export async function jobs({ pool }: Services) {
  const { rows } = await pool.query<{ task: string; key: string | null; run_at: Date }>(
    'select task_identifier as task, key, run_at from graphile_worker.jobs order by id',
  );
  return rows;
}

type Settings = (typeof studioSettings.$inferSelect)['settings'];

export async function setStudio({ db }: Services, changes: Partial<Settings>) {
  const settings: Settings = {
    name: 'Marrowfen Casting House',
    place: 'Ostrey Quay',
    refPrefix: 'MF',
    timeZone: 'Europe/London',
    replyTo: 'studio@example.org',
    mark: 'a reed between two dots',
    quietHours: null,
    progressEveryDays: null,
    ...changes,
  };
  await db
    .insert(studioSettings)
    .values({ id: 'studio', settings })
    .onConflictDoUpdate({ target: studioSettings.id, set: { settings } });
}
