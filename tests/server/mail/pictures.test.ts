import { mkdirSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import sharp from 'sharp';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { photos } from '../../../src/server/db/schema/making';
import { readPictures } from '../../../src/server/mail/pictures';
import { openPostOffice, type PostOffice } from './post-office';
import { addCommission } from './rows';
import { photoIds } from './sample-letters';

let office: PostOffice;
beforeEach(async () => (office = await openPostOffice()));
afterEach(() => office.close());

const picture = (photoId: string) => ({ photoId, caption: 'The tip', alt: '' });

/** Stores a photo as the bench page would, from raw noise when it is to be heavy. */
async function addPhoto(photoId: string, noisy: boolean) {
  const { services } = office;
  const [width, height] = [960, 720];
  const raw = Buffer.alloc(width * height * 3);
  if (noisy) for (let i = 0, seed = 7; i < raw.length; i += 1) raw[i] = (seed = (seed * 16_807) % 2_147_483_647) % 256;
  const body = await sharp(raw, { raw: { width, height, channels: 3 } })
    .webp()
    .toBuffer();
  const key = `photos/${photoId.slice(-2)}/${photoId}.webp`;
  const path = join(services.config.uploadsFolder, key);
  mkdirSync(dirname(path), { recursive: true });
  writeFileSync(path, body);
  const size = { key, width, height };
  await services.db.insert(photos).values({
    id: photoId,
    clientId: photoId,
    commissionId: (await addCommission(services, { ref: `MF-${photoId.slice(-4)}` })).id,
    stage: 'sound',
    caption: 'The tip',
    sha256: 'c'.repeat(64),
    files: { large: size, medium: size, thumb: size },
    takenAt: services.now(),
    createdAt: services.now(),
  });
}

test('photos travel as JPEG, the same bytes each time', async () => {
  await addPhoto(photoIds[0], false);
  const [first] = await readPictures(office.services, [picture(photoIds[0])]);
  const [second] = await readPictures(office.services, [picture(photoIds[0])]);
  expect((await sharp(first!.content).metadata()).format).toBe('jpeg');
  expect(second!.content.equals(first!.content)).toBe(true);
});

test('together they stay under a megabyte; what does not fit or is gone is left out', async () => {
  await addPhoto(photoIds[0], true);
  await addPhoto(photoIds[1], true);
  const gone = '018f0000-0000-7000-8000-00000000dead';
  const enclosed = await readPictures(office.services, [picture(photoIds[0]), picture(gone), picture(photoIds[1])]);
  expect(enclosed.length).toBeLessThan(3);
  expect(enclosed.reduce((sum, each) => sum + each.content.length, 0)).toBeLessThan(1_000_000);
  expect(enclosed.map((each) => each.photoId)).not.toContain(gone);
});
