import { inArray } from 'drizzle-orm';
import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { photos } from '../db/schema/making';
import type { Services } from '../services';
import type { Picture } from './letter-data';

/** A photo that travels inside the mail; the letter shows it as `cid:<photoId>`. */
export interface EnclosedPicture {
  photoId: string;
  content: Buffer;
}

/** All pictures of one mail together stay under this, so that no mailbox refuses it. */
const MOST_BYTES = 900_000;

/**
 * Reads the pictures a letter shows, each in the largest of its small sizes that still fits. A picture whose
 * file is gone or does not fit is left out; its caption still tells of it.
 */
export async function readPictures(services: Services, wanted: Picture[]): Promise<EnclosedPicture[]> {
  if (wanted.length === 0) return [];
  const ids = wanted.map((picture) => picture.photoId);
  const rows = await services.db
    .select({ id: photos.id, files: photos.files })
    .from(photos)
    .where(inArray(photos.id, ids));
  const enclosed: EnclosedPicture[] = [];
  let left = MOST_BYTES;
  for (const photoId of new Set(ids)) {
    const files = rows.find((row) => row.id === photoId)?.files;
    const content = files && (await readFitting(services, [files.medium.key, files.thumb.key], left));
    if (!content) continue;
    left -= content.length;
    enclosed.push({ photoId, content });
  }
  return enclosed;
}

async function readFitting(services: Services, keys: string[], most: number): Promise<Buffer | null> {
  for (const key of keys) {
    try {
      const content = await readFile(join(services.config.uploadsFolder, key));
      if (content.length <= most) return content;
    } catch (error) {
      services.log.warn({ err: error, key }, 'a photo for a mail could not be read');
    }
  }
  return null;
}
