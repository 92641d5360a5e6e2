import { inArray } from 'drizzle-orm';
import sharp from 'sharp';
import { photos } from '../db/schema/making';
import type { Services } from '../services';
import { pathOf } from '../storage/disk';
import type { Picture } from './letter-data';

/** Pixels across: twice the width a letter shows it at on a small screen. */
const WIDEST = 960;
const QUALITY = 76;

/** A photo that travels inside the mail; the letter shows it as `cid:<photoId>`. */
export interface EnclosedPicture {
  photoId: string;
  content: Buffer;
}

/** All pictures of one mail together stay under this, so that no mailbox refuses it. */
const MOST_BYTES = 900_000;

/**
 * Reads the pictures a letter shows, as JPEG, which every mail program opens. A picture whose file is gone, or that
 * would make the mail too heavy, is left out; its caption still tells of it.
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
    const key = rows.find((row) => row.id === photoId)?.files.medium.key;
    const content = key === undefined ? null : await asJpeg(services, key);
    if (!content || content.length > left) continue;
    left -= content.length;
    enclosed.push({ photoId, content });
  }
  return enclosed;
}

async function asJpeg({ config, log }: Services, key: string): Promise<Buffer | null> {
  try {
    return await sharp(pathOf(config.uploadsFolder, key))
      .resize({ width: WIDEST, withoutEnlargement: true })
      .jpeg({ quality: QUALITY })
      .toBuffer();
  } catch (error) {
    log.warn({ err: error, key }, 'a photo for a mail could not be read');
    return null;
  }
}
