import { and, eq, inArray, isNull, lt, or } from 'drizzle-orm';
import { may, type Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { commissions, uploads } from '../db/schema/commissions';
import type { Services } from '../services';
import { discard } from '../storage/disk';

export type UploadRow = typeof uploads.$inferSelect;
const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;
const GONE = 'There is no such file, or it is not yours to open.';

/** Finds a file for the owner, for the customer whose commission holds it, or for the browser that sent it and has not used it yet. */
export async function findUpload(
  services: Services,
  actor: Actor,
  browserId: string,
  id: string | undefined,
): Promise<Outcome<UploadRow>> {
  if (!id || !UUID.test(id)) return refuse('not-found', GONE);
  const [row] = await services.db
    .select({ upload: uploads, customerId: commissions.customerId })
    .from(uploads)
    .leftJoin(commissions, eq(commissions.id, uploads.commissionId))
    .where(eq(uploads.id, id));
  if (!row) return refuse('not-found', GONE);
  const { upload, customerId } = row;
  const fresh = upload.commissionId === null && upload.browserId === browserId;
  const held = upload.commissionId !== null && may(actor, 'upload:read', { customerId });
  return fresh || held ? done(upload) : refuse('not-found', GONE);
}

/** Removes a file its sender no longer wants; one that belongs to an enquiry stays. */
export async function removeUpload(
  services: Services,
  browserId: string,
  id: string | undefined,
): Promise<Outcome<{ removed: boolean }>> {
  if (!id || !UUID.test(id)) return refuse('not-found', GONE);
  const [row] = await services.db
    .delete(uploads)
    .where(and(eq(uploads.id, id), eq(uploads.browserId, browserId), isNull(uploads.commissionId)))
    .returning();
  if (!row) return refuse('not-found', GONE);
  await discard(services.config.uploadsFolder, row.storageKey, row.thumbKey);
  return done({ removed: true });
}

const ORPHAN_DAYS = 7;
const UNCONFIRMED_DAYS = 30;

/**
 * Deletes files that no enquiry has taken up for a week, or whose enquiry was not confirmed for a month; rows first.
 * Returns how many.
 */
export async function sweepUploads(services: Services): Promise<number> {
  const daysAgo = (days: number) => new Date(services.now().getTime() - days * 86_400_000);
  const unconfirmed = services.db
    .select({ id: commissions.id })
    .from(commissions)
    .where(isNull(commissions.confirmedAt));
  const rows = await services.db
    .delete(uploads)
    .where(
      or(
        and(isNull(uploads.commissionId), lt(uploads.createdAt, daysAgo(ORPHAN_DAYS))),
        and(inArray(uploads.commissionId, unconfirmed), lt(uploads.createdAt, daysAgo(UNCONFIRMED_DAYS))),
      ),
    )
    .returning();
  for (const row of rows) await discard(services.config.uploadsFolder, row.storageKey, row.thumbKey);
  return rows.length;
}
