import { inArray, sql } from 'drizzle-orm';
import type { Db } from '../db/client';
import { uploads } from '../db/schema/commissions';
import { photos } from '../db/schema/making';
import type { Services } from '../services';
import { sweepStrays } from './sweep';
import { sweepUploads } from '../uploads/read-upload';

/** Deletes uploads nobody took up, then files on the disk that no row names. Returns how many went. */
export async function sweepFiles(services: Services): Promise<number> {
  const taken = await sweepUploads(services);
  const strays = await sweepStrays(services.config.uploadsFolder, new Date(), (keys) => namedKeys(services.db, keys));
  return taken + strays;
}

async function namedKeys(db: Db, keys: string[]): Promise<ReadonlySet<string>> {
  const files = await db
    .select({ file: uploads.storageKey, thumb: uploads.thumbKey })
    .from(uploads)
    .where(sql`${inArray(uploads.storageKey, keys)} or ${inArray(uploads.thumbKey, keys)}`);
  const pictures = await db
    .select({ files: photos.files })
    .from(photos)
    .where(
      sql`exists (select from jsonb_each(${photos.files}) as size where size.value ->> 'key' in (${sql.join(
        keys.map((key) => sql`${key}`),
        sql`, `,
      )}))`,
    );
  const named = [
    ...files.flatMap(({ file, thumb }) => [file, thumb]),
    ...pictures.flatMap((row) => Object.values(row.files).map(({ key }) => key)),
  ];
  return new Set(named.filter((key): key is string => key !== null));
}
