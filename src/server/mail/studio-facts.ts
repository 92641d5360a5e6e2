import { STUDIO } from '../../commission/studio';
import type { Db } from '../db/client';
import { studioSettings } from '../db/schema/studio';

/** What mails need to know of the studio that sends them. */
export interface StudioFacts {
  name: string;
  place: string;
  replyTo: string;
  /** IANA name; days and times in mails are the studio's own. */
  timeZone: string;
  quietHours: { from: string; to: string } | null;
  progressEveryDays: number | null;
}

/** A studio that has not written down its settings yet: quiet from 20:30 to 07:30, each stage told at once. */
const BEFORE_SETTINGS: StudioFacts = {
  name: STUDIO.name,
  place: STUDIO.place,
  replyTo: STUDIO.mail,
  timeZone: 'Europe/London',
  quietHours: { from: '20:30', to: '07:30' },
  progressEveryDays: null,
};

/** Reads the studio's settings; a studio without any gets usable ones. */
export async function readStudioFacts(db: Db): Promise<StudioFacts> {
  const [row] = await db.select({ settings: studioSettings.settings }).from(studioSettings).limit(1);
  return row ? { ...BEFORE_SETTINGS, ...row.settings } : BEFORE_SETTINGS;
}
