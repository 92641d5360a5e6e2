// The specification, capability 25; reliability plan row 19: no place and no person in any served copy, orientation kept.
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { APIContext } from 'astro';
import { eq } from 'drizzle-orm';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { POST as photoDoor } from '../../../src/pages/api/bench/[ref]/photos';
import { GET as pictureDoor } from '../../../src/pages/api/photos/[id]/[size]';
import { photos } from '../../../src/server/db/schema/making';
import { FILE_HEADER } from '../../../src/server/file-response';
import { PHOTO_SIZES } from '../../../src/server/making/photos';
import { addPhoto } from '../../../src/server/making/receive-photo';
import { codeOf, commission, newEnquiry, type Person } from '../deal/deal-setting';
import { booked, entryId } from '../../factories/bench';
import { filesIn, formRequest, phonePhoto, picture } from '../../factories/files';
import { countOf, historyOf, openPayingStudio, type PayingStudio } from '../../factories/paying-studio';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

const fields = (more: Record<string, string> = {}) => ({
  clientId: entryId(),
  stage: 'pattern',
  caption: 'Pattern with scale',
  ...more,
});
const take = (ref: string, body: Buffer, more: Record<string, string> = {}, by: Person | null = studio.maker) =>
  addPhoto(studio.services, by, ref, formRequest(body, 'IMG_0001.jpg', fields(more)));
const stored = () => filesIn(studio.services.config.uploadsFolder);
async function sizesOf(id: string) {
  const [row] = await studio.services.db.select().from(photos).where(eq(photos.id, id));
  const read = (key: string) => readFileSync(join(studio.services.config.uploadsFolder, key));
  return Object.entries(row!.files).map(([size, { key, width, height }]) => ({
    size,
    bytes: read(key),
    width,
    height,
  }));
}

describe('a photo from a phone', () => {
  // EXIF 3.0, table of tag Orientation: 1 as it lies, 3 upside down, 6 and 8 on its sides, the even ones mirrored.
  it.each([1, 2, 3, 4, 5, 6, 7, 8])(
    'turned %i is upright in every size, without its place or anybody’s name',
    async (turn) => {
      const ref = await booked(studio);
      const sent = await phonePhoto(turn);
      const before = await sharp(sent).metadata();
      expect(before.orientation).toBe(turn);
      expect(before.exif!.includes('Isolde')).toBe(true);
      const taken = await take(ref, sent);
      if (!taken.ok) throw new Error(taken.problem.message);
      const lies = turn < 5;
      for (const { size, bytes, width, height } of await sizesOf(taken.value.id)) {
        const meta = await sharp(bytes).metadata();
        expect(meta, size).toMatchObject({ format: 'webp', width, height });
        expect(width > height, size).toBe(lies);
        for (const part of [meta.exif, meta.xmp, meta.iptc, meta.icc, meta.orientation])
          expect(part, size).toBeUndefined();
        for (const secret of ['Isolde', 'Quayside', 'Kitchen', 'EXIF', 'XMP ', 'GPS']) {
          expect(bytes.includes(secret), `${secret} in ${size}`).toBe(false);
        }
        expect(await redCorner(bytes), size).toBe(CORNERS[turn - 1]);
      }
    },
  );

  it('comes in three sizes that are no larger than asked, and no larger than it was', async () => {
    const ref = await booked(studio);
    const large = await take(ref, await picture('jpeg', 2_600, 1_300));
    const small = await take(ref, await picture('png', 500, 200));
    if (!large.ok || !small.ok) throw new Error('a photo was refused');
    const widths = async (id: string) =>
      Object.fromEntries((await sizesOf(id)).map(({ size, width }) => [size, width]));
    expect(await widths(large.value.id)).toEqual({ large: 2_000, medium: 960, thumb: 320 });
    expect(await widths(small.value.id)).toEqual({ large: 500, medium: 500, thumb: 320 });
  });

  it('sent many times under one id is one photo, one line of history and three files', async () => {
    const ref = await booked(studio);
    const id = entryId();
    const body = await picture('jpeg');
    const before = stored().length;
    const sent = await Promise.all(Array.from({ length: 8 }, () => take(ref, body, { clientId: id })));
    for (const outcome of sent) expect(outcome).toEqual(sent[0]);
    expect(await take(ref, body, { clientId: id })).toEqual(sent[0]);
    expect(stored().length).toBe(before + 3);
    expect(countOf(await historyOf(studio, ref), 'photo')).toBe(1);
  });
});

describe('a photo is refused', () => {
  it.each([
    ['no picture', () => Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"/>'), {}, 'unsupported'],
    ['a GIF', () => Buffer.from('GIF89a\x01\x00\x01\x00\x00\x00\x00;', 'latin1'), {}, 'unsupported'],
    ['cut short', async () => (await picture('jpeg', 900, 700)).subarray(0, 2_000), {}, 'unsupported'],
    ['empty', () => Buffer.alloc(0), {}, 'invalid'],
    ['without words', () => picture('jpeg'), { caption: '  ' }, 'invalid'],
    ['of no stage', () => picture('jpeg'), { stage: 'somewhere' }, 'invalid'],
    ['without an id', () => picture('jpeg'), { clientId: '' }, 'invalid'],
  ] as const)('when it is %s, and leaves nothing behind', async (_what, make, more, code) => {
    const ref = await booked(studio);
    const before = stored();
    expect(codeOf(await take(ref, await make(), more))).toBe(code);
    expect(stored()).toEqual(before);
    expect(countOf(await historyOf(studio, ref), 'photo')).toBe(0);
  });

  it('from anybody who does not work at the bench, and of what has not come there', async () => {
    const ref = await booked(studio);
    const body = await picture('jpeg');
    for (const by of [studio.customer, studio.other, studio.bookkeeper, null]) {
      expect(codeOf(await take(ref, body, {}, by))).not.toBe('ok');
    }
    expect(codeOf(await take(await newEnquiry(studio), body))).toBe('conflict');
  });
});

describe('at the doors', () => {
  const context = (request: Request, params: Record<string, string>, user: Person | null) =>
    ({
      request,
      url: new URL(request.url),
      params,
      locals: { services: studio.services, user, browserId: 'browser-of-the-bench' },
    }) as unknown as APIContext;

  it('a plain form that is refused gives its words back', async () => {
    const ref = await booked(studio);
    const request = formRequest(Buffer.from('no picture'), 'a.jpg', fields({ caption: 'Edge at the tip' }));
    const answer = await photoDoor(context(request, { ref }, studio.maker));
    expect(answer.status).toBe(303);
    const again = new URL(answer.headers.get('location')!, 'http://localhost').searchParams.get('again');
    const { rows } = await studio.services.pool.query('select values from form_returns where id = $1', [again]);
    expect(rows).toMatchObject([{ values: { caption: 'Edge at the tip', stage: 'pattern' } }]);
  });

  it('a picture is named to the web server by a path below the uploads, and only for those who may see it', async () => {
    const ref = await booked(studio);
    const taken = await take(ref, await picture('jpeg'));
    const id = taken.ok ? taken.value.id : '';
    for (const size of Object.keys(PHOTO_SIZES)) {
      const request = new Request(`http://localhost/api/photos/${id}/${size}`);
      const seen = await pictureDoor(context(request, { id, size }, studio.customer));
      const path = decodeURIComponent(seen.headers.get(FILE_HEADER)!);
      expect(path).toMatch(/^uploads\/photos\/[0-9a-f]{2}\/[0-9a-f-]{36}\.webp$/);
      expect(readFileSync(join(studio.services.config.dataFolder, path)).length).toBeGreaterThan(0);
      const stranger = await pictureDoor(context(request, { id, size }, studio.other));
      expect([stranger.status, stranger.headers.get(FILE_HEADER)]).toEqual([404, null]);
    }
    expect((await commission(studio, ref)).deal).toBe('booked');
  });
});

/** Where the red corner of the test picture is to be seen once it is turned as its tag says. */
const CORNERS = [
  'top left',
  'top right',
  'bottom right',
  'bottom left',
  'top left',
  'top right',
  'bottom right',
  'bottom left',
];

async function redCorner(bytes: Buffer): Promise<string | undefined> {
  const { data, info } = await sharp(bytes).removeAlpha().raw().toBuffer({ resolveWithObject: true });
  const isRed = (x: number, y: number) => {
    const at = (Math.floor(y * info.height) * info.width + Math.floor(x * info.width)) * info.channels;
    return data[at]! > 128 && data[at + 2]! < 90;
  };
  const found = [
    ['top left', 0.25, 0.25],
    ['top right', 0.75, 0.25],
    ['bottom left', 0.25, 0.75],
    ['bottom right', 0.75, 0.75],
  ] as const;
  return found
    .filter(([, x, y]) => isRed(x, y))
    .map(([name]) => name)
    .join();
}
