import { desc, eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { z } from 'zod';
import { PIECE_STAGES } from '../../commission/making/making';
import { may, type Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { lockCommission } from '../commissions';
import type { Transaction } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { attempts, photos } from '../db/schema/making';
import { addToOpenGate } from './gates';
import { recordEvent } from '../history';
import { readPieces } from './pieces';
import type { Services } from '../services';
import { discard, put, servedPath } from '../storage/disk';
import type { MadePicture } from '../uploads/pictures';

export type PhotoRow = typeof photos.$inferSelect;
export const PHOTO_SIZES = { large: 2_000, medium: 960, thumb: 320 } as const;
export type PhotoSize = keyof typeof PHOTO_SIZES;

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
export type PhotoFields = z.output<typeof photoFieldsSchema>;

/** The photo that came with this id, if it came before. */
export async function byClientId(services: Services, clientId: string): Promise<PhotoRow | undefined> {
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
    const piece = await pieceOf(tx, commission.id, fields.piece);
    // A phone whose clock is wrong does not push its photo out of the order of things.
    const taken = fields.takenAt;
    const takenAt = taken && taken <= now && taken >= commission.createdAt ? taken : now;
    const [row] = await tx
      .insert(photos)
      .values({
        id: uuidv7(),
        clientId: fields.clientId,
        commissionId,
        pieceId: piece?.id ?? null,
        attemptId: piece ? await attemptOf(tx, piece.id) : null,
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
      if (fields.stage === 'pattern') await addToOpenGate(tx, commissionId, row.id);
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

/** The piece a photo shows: the one named, or the only one there is. */
async function pieceOf(tx: Transaction, commissionId: string, number: number | undefined) {
  const all = await readPieces(tx, commissionId);
  return all.length === 1 ? all[0] : all.find((piece) => piece.number === number);
}

/** The casting a piece is at; none before its mould, and never one that was scrapped. */
async function attemptOf(tx: Transaction, pieceId: string): Promise<string | null> {
  const [row] = await tx
    .select({ id: attempts.id, result: attempts.result })
    .from(attempts)
    .where(eq(attempts.pieceId, pieceId))
    .orderBy(desc(attempts.number))
    .limit(1);
  return row && row.result !== 'scrapped' ? row.id : null;
}

/** A stored photo's file for those who may see its commission's photos. */
export async function findPhoto(
  services: Services,
  actor: Actor,
  id: string | undefined,
  size: string | undefined,
): Promise<Outcome<{ path: string }>> {
  const gone = refuse('not-found', 'There is no such photo, or it is not yours to see.');
  if (!z.uuid().safeParse(id).success || !size || !Object.hasOwn(PHOTO_SIZES, size)) return gone;
  const [row] = await services.db
    .select({ photo: photos, customerId: commissions.customerId })
    .from(photos)
    .innerJoin(commissions, eq(commissions.id, photos.commissionId))
    .where(eq(photos.id, id ?? ''));
  if (!row || !may(actor, 'photo:read', row)) return gone;
  if (actor?.role === 'customer' && !row.photo.shared) return gone;
  return done({ path: servedPath(row.photo.files[size as PhotoSize].key) });
}
