import { STUDIO } from '../commission/studio';
import type { Db } from './db/client';
import { studioSettings } from './db/schema/studio';

/** The studio's own facts as quotes and numbers need them. */
export type QuotingStudio = Pick<
  typeof studioSettings.$inferSelect.settings,
  'name' | 'place' | 'refPrefix' | 'timeZone' | 'mark' | 'vatNumber'
>;

const UNSET: QuotingStudio = {
  name: STUDIO.name,
  place: STUDIO.place,
  refPrefix: 'MF',
  timeZone: 'Europe/London',
  mark: 'The studio’s mark, the year and a code',
};

/** Reads the studio's facts; a studio that has set none gets the ones its pages show. */
export async function readStudio(db: Db): Promise<QuotingStudio> {
  const [row] = await db.select({ settings: studioSettings.settings }).from(studioSettings).limit(1);
  if (!row) return UNSET;
  const { name, place, refPrefix, timeZone, mark, vatNumber } = row.settings;
  return { name, place, refPrefix, timeZone, mark, ...(vatNumber ? { vatNumber } : {}) };
}
