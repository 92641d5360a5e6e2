// Reliability plan section 6: each file row has its file, and no file lacks a row after the sweep; kill -9 in between.
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, utimesSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { commissions, uploads } from '../../../src/server/db/schema/commissions';
import { photos } from '../../../src/server/db/schema/making';
import { CLOCK_TASKS, TASKS } from '../../../src/server/jobs/tasks';
import { addPhoto } from '../../../src/server/making/receive-photo';
import { sweepFiles } from '../../../src/server/storage/sweep-files';
import { receiveUpload } from '../../../src/server/uploads/receive-upload';
import { codeOf, newEnquiry, SENDER } from '../deal/deal-setting';
import { booked, entryId } from '../../factories/bench';
import { clientId, filesIn, formRequest, picture, stl } from '../../factories/files';
import { openPayingStudio, type PayingStudio } from '../../factories/paying-studio';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

const DAY = 24 * 60 * 60_000;
const folder = () => studio.services.config.uploadsFolder;
const keys = () => filesIn(folder());
const later = (days: number) => {
  studio.clock.now = new Date(studio.clock.now.getTime() + days * DAY);
};
/** Makes files look so many days old. */
const age = (names: string[], days: number) => {
  const at = new Date(Date.now() - days * DAY);
  for (const name of names) utimesSync(join(folder(), name), at, at);
};
const upload = (browser: string) =>
  receiveUpload(studio.services, null, browser, formRequest(stl, 'block.stl', { clientId: clientId() }));

/** Every key that a row names, and whether its file is there. */
async function named(): Promise<Map<string, boolean>> {
  const { db } = studio.services;
  const files = await db.select().from(uploads);
  const pictures = await db.select().from(photos);
  const all = [
    ...files.flatMap((row) => [row.storageKey, row.thumbKey]),
    ...pictures.flatMap((row) => Object.values(row.files).map(({ key }) => key)),
  ].filter((key): key is string => key !== null);
  return new Map(all.map((key) => [key, existsSync(join(folder(), key))]));
}

async function expectTidy() {
  const rows = await named();
  expect([...rows].filter(([, there]) => !there)).toEqual([]);
  expect(keys()).toEqual([...rows.keys()].sort());
}

describe('the sweep', () => {
  it('deletes files that no row names once they are a day old, and no others', async () => {
    const ref = await booked(studio);
    const photo = { clientId: entryId(), stage: 'pattern', caption: 'Pattern' };
    await addPhoto(studio.services, studio.maker, ref, formRequest(await picture('jpeg'), 'a.jpg', photo));
    await upload('browser-of-the-sweep');
    const kept = keys();
    age(kept, 30);
    const shelf = kept
      .find((key) => key.startsWith('photos/'))!
      .split('/')
      .slice(0, 2)
      .join('/');
    const strays = ['old', 'new'].map(
      (name, place) => `${shelf}/0190c0de-0000-7000-8000-00000000000${place}-${name}.webp`,
    );
    for (const stray of strays) writeFileSync(join(folder(), stray), 'x');
    age([strays[0]!], 2);
    expect(await sweepFiles(studio.services)).toBe(1);
    expect(keys()).toEqual([...kept, strays[1]!].sort());
    age([strays[1]!], 2);
    await TASKS['sweep-files']!(studio.services, {});
    await expectTidy();
    expect(CLOCK_TASKS['sweep-files']).toMatch(/^\d+ \* \* \* \*$/);
  });

  it('deletes uploads that no enquiry took up for a week, and those of an enquiry unconfirmed for a month', async () => {
    const { services } = studio;
    const [left, asked, mine] = [await upload('a'), await upload(SENDER.browserId), await upload(SENDER.browserId)];
    if (!left.ok || !asked.ok || !mine.ok) throw new Error('an upload was refused');
    const unconfirmed = await newEnquiry(studio, { uploads: [asked.value.id] });
    await services.db.update(commissions).set({ confirmedAt: null }).where(eq(commissions.ref, unconfirmed));
    await newEnquiry(studio, { uploads: [mine.value.id] });
    const there = async () => (await services.db.select({ id: uploads.id }).from(uploads)).map((row) => row.id);
    later(6);
    await sweepFiles(services);
    expect(await there()).toEqual(expect.arrayContaining([left.value.id, asked.value.id, mine.value.id]));
    later(2);
    await sweepFiles(services);
    expect(await there()).not.toContain(left.value.id);
    expect(await there()).toEqual(expect.arrayContaining([asked.value.id, mine.value.id]));
    later(30);
    await sweepFiles(services);
    expect(await there()).not.toContain(asked.value.id);
    expect(await there()).toContain(mine.value.id);
    await expectTidy();
  });
});

describe('a server killed while it takes in a photo', () => {
  async function killedAt(point: string, ref: string, id: string): Promise<NodeJS.Signals | null> {
    const { databaseUrl, dataFolder } = studio.services.config;
    const file = join(dataFolder, 'IMG_0001.jpg');
    writeFileSync(file, await picture('jpeg'));
    const script = ['--import', 'tsx', 'tests/server/files/dying-bench.ts'];
    const facts = [databaseUrl, dataFolder, JSON.stringify(studio.maker), ref, file, id, point];
    const child = spawn(process.execPath, [...script, ...facts], { stdio: ['ignore', 'ignore', 'inherit'] });
    const [, signal] = (await once(child, 'exit')) as [number | null, NodeJS.Signals | null];
    return signal;
  }

  it.each([
    ['arrived', 1],
    ['stored', 4],
    ['written', 4],
  ] as const)(
    'at “%s” leaves no row without its file, and after the sweep no file without its row; sent again it is there once',
    async (point, strays) => {
      const ref = await booked(studio);
      const id = entryId();
      const before = keys().length;
      expect(await killedAt(point, ref, id)).toBe('SIGKILL');
      const { db } = studio.services;
      expect(await db.select().from(photos).where(eq(photos.clientId, id))).toEqual([]);
      expect(keys().length - before).toBe(strays);
      const photo = { clientId: id, stage: 'pattern', caption: 'Pattern' };
      const again = await addPhoto(
        studio.services,
        studio.maker,
        ref,
        formRequest(await picture('jpeg'), 'a.jpg', photo),
      );
      expect(codeOf(again)).toBe('ok');
      age(keys(), 2);
      expect(await sweepFiles(studio.services)).toBe(strays);
      await expectTidy();
    },
    60_000,
  );
});
