import { createHash, randomUUID } from 'node:crypto';
import { rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Config } from '../../server/config';
import { PHOTO_SIZES, putSizes } from '../../server/making/photos';
import { makePictures } from '../../server/uploads/pictures';
import { must, type StoredPicture } from '../world';
import { axePictures } from './gallery-axes';
import { smallPictures } from './gallery-small';
import { swordPictures } from './gallery-swords';
import { photograph } from './scene';
import { openStock } from './stock';

/** Every picture of the demo by its name, each made when asked for. */
export function gallery(contentFolder: string): Map<string, () => Promise<Buffer>> {
  const stocks = openStock(contentFolder);
  const scenes = [...swordPictures(stocks), ...axePictures(stocks), ...smallPictures(stocks)];
  return new Map(scenes.map(([name, scene]) => [name, () => photograph(scene())]));
}

const AT_ONCE = 3;

/**
 * Makes the demo's pictures and stores them in their three sizes, as photos from a phone are: none of them lies in the
 * repository. While one is being painted, others are being stored.
 */
export async function storePictures(config: Config): Promise<Map<string, StoredPicture>> {
  const waiting = [...gallery(config.contentFolder)];
  const stored = new Map<string, StoredPicture>();
  const hand = async () => {
    for (let next = waiting.shift(); next; next = waiting.shift()) {
      const [name, make] = next;
      stored.set(name, await store(config, name, await make()));
    }
  };
  await Promise.all(Array.from({ length: AT_ONCE }, hand));
  return stored;
}

async function store(config: Config, name: string, jpeg: Buffer): Promise<StoredPicture> {
  const path = join(tmpdir(), `pourwright-${randomUUID()}.jpg`);
  try {
    await writeFile(path, jpeg);
    const made = must(await makePictures(path, PHOTO_SIZES), `picture ${name}`);
    const sha256 = createHash('sha256').update(jpeg).digest('hex');
    return { sha256, files: await putSizes(config.uploadsFolder, made) };
  } finally {
    await rm(path, { force: true });
  }
}
