import { eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { z } from 'zod';
import { PIECE_STAGES } from '../commission/making';
import { may, type Actor } from '../commission/permissions';
import { done, refuse, type Outcome } from '../commission/problem';
import { findCommission, lockCommission } from './commissions';
import { commissions } from './db/schema/commissions';
import { photos } from './db/schema/making';
import { recordEvent } from './history';
import { readPieces } from './pieces';
import type { Services } from './services';
import { discard, pathOf, put } from './storage/disk';
import { readMultipart } from './storage/multipart';
import { makePictures, type MadePicture } from './uploads/pictures';

export type PhotoRow = typeof photos.$inferSelect;
export const PHOTO_SIZES = { large: 2_000, medium: 960, thumb: 320 } as const;
export type PhotoSize = keyof typeof PHOTO_SIZES;

const LIMIT = { bytes: 30 * 1024 * 1024, words: '30 MB' };

/** What comes with a photo. `stage` is the stage being worked towards; `takenAt` the phone's clock. */
export const photoFieldsSchema = z.object({
  clientId: z
    .string()
    .regex(/^[0-9A-Za-z-]{8,64}$/, 'The photo has no id of its own. Reload the page and take it again.'),
  stage: z.enum(PIECE_STAGES),
  caption: z.string().trim().min(1, 'Say in a few words what the photo shows.').max(200),
  alt: z.string().trim().max(600).default(''),
  piece: z.preprocess((value) => (value === '' ? undefined : value), z.coerce.number().int().min(1).optional()),
  takenAt: z.preprocess((value) => (value === '' ? undefined : value), z.coerce.date().optional()),
});
type PhotoFields = z.output<typeof photoFieldsSchema>;

/**
 * Takes in a photo of the work: turned upright, stripped of metadata, in three sizes, and on the
 * customer's page at once. The same client id twice is one photo.
 */
export async function addPhoto(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  request: Request,
): Promise<Outcome<{ id: string }>> {
  const found = await findCommission(services, actor, ref, 'bench:work');
  if (!found.ok) return found;
  const folder = services.config.uploadsFolder;
  const body = await readMultipart(request, folder, LIMIT);
  if (!body.ok) return body;
  const { file, fields } = body.value;
  const drop = () => discard(folder, file?.key);
  if (!file || file.bytes === 0) {
    await drop();
    return refuse('invalid', 'No photo came with the request. Take it again.');
  }
  const parsed = photoFieldsSchema.safeParse(fields);
  if (!parsed.success) {
    await drop();
    return refuse('invalid', parsed.error.issues[0]!.message, {
      [String(parsed.error.issues[0]!.path[0])]: parsed.error.issues[0]!.message,
    });
  }
  const known = await byClientId(services, parsed.data.clientId);
  if (known) {
    await drop();
    return done({ id: known.id });
  }
  const made = await makePictures(pathOf(folder, file.key), PHOTO_SIZES);
  await drop();
  if (!made.ok) return made;
  return storePhoto(services, actor, found.value.id, {
    fields: parsed.data,
    sha256: file.sha256,
    files: await putSizes(folder, made.value),
  });
}

async function byClientId(services: Services, clientId: string): Promise<PhotoRow | undefined> {
  const [row] = await services.db.select().from(photos).where(eq(photos.clientId, clientId));
  return row;
}

/** Stores the three sizes of one picture; also used by the demo. */
export async function putSizes(folder: string, made: Record<PhotoSize, MadePicture>): Promise<PhotoRow['files']> {
  const files = {} as PhotoRow['files'];
  for (const size of Object.keys(PHOTO_SIZES) as PhotoSize[]) {
    const { body, width, height } = made[size];
    files[size] = { key: await put(folder, 'photos', '.webp', body), width, height };
  }
  return files;
}

/** A photo made ready: what comes with it, the hash of the file as sent, and its three stored sizes. */
export interface NewPhoto {
  fields: PhotoFields;
  sha256: string;
  files: PhotoRow['files'];
}

/** Writes a photo whose sizes are stored and tells the commission's page; the demo's photos come in here. */
export async function storePhoto(
  services: Services,
  actor: Actor,
  commissionId: string,
  photo: NewPhoto,
): Promise<Outcome<{ id: string }>> {
  const now = services.now();
  const { fields } = photo;
  const stored = await services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, commissionId);
    const piece = (await readPieces(tx, commission.id)).find((each) => each.number === fields.piece);
    const takenAt = fields.takenAt && fields.takenAt.getTime() <= now.getTime() ? fields.takenAt : now;
    const [row] = await tx
      .insert(photos)
      .values({
        id: uuidv7(),
        clientId: fields.clientId,
        commissionId,
        pieceId: piece?.id ?? null,
        stage: fields.stage,
        caption: fields.caption,
        alt: fields.alt || fields.caption,
        sha256: photo.sha256,
        files: photo.files,
        takenAt,
        by: actor!.id,
        createdAt: now,
      })
      .onConflictDoNothing({ target: photos.clientId })
      .returning({ id: photos.id });
    if (row) {
      await recordEvent(tx, {
        commissionId,
        code: 'photo',
        actor,
        sentence: `A photo was added: ${fields.caption}`,
        public: true,
        at: now,
        data: { photo: row.id, clientId: fields.clientId },
      });
    }
    return row;
  });
  if (stored) return done({ id: stored.id });
  await discard(services.config.uploadsFolder, ...Object.values(photo.files).map((file) => file.key));
  const rival = await byClientId(services, fields.clientId);
  if (!rival) throw new Error('a photo lost a race that nobody won');
  return done({ id: rival.id });
}

/** A stored photo's file for those who may see its commission's photos. */
export async function findPhoto(
  services: Services,
  actor: Actor,
  id: string | undefined,
  size: string | undefined,
): Promise<Outcome<{ path: string }>> {
  const gone = refuse('not-found', 'There is no such photo, or it is not yours to see.');
  if (!id || !/^[0-9a-f-]{36}$/.test(id) || !size || !(size in PHOTO_SIZES)) return gone;
  const [row] = await services.db
    .select({ photo: photos, customerId: commissions.customerId })
    .from(photos)
    .innerJoin(commissions, eq(commissions.id, photos.commissionId))
    .where(eq(photos.id, id));
  if (!row || !may(actor, 'photo:read', row)) return gone;
  if (actor?.role === 'customer' && !row.photo.shared) return gone;
  return done({ path: pathOf(services.config.uploadsFolder, row.photo.files[size as PhotoSize].key) });
}
