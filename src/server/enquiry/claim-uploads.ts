import { and, eq, inArray, isNull } from 'drizzle-orm';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import type { Transaction } from '../db/client';
import { uploads } from '../db/schema/commissions';

type UploadRow = typeof uploads.$inferSelect;

/**
 * Finds the files named in an enquiry that this browser, or this person, sent and no commission holds yet. One that is
 * gone or somebody else's refuses the lot, so that nobody believes a file was received that was not.
 */
export async function findClaimable(
  tx: Transaction,
  ids: readonly string[],
  browserId: string,
  actor: Actor,
): Promise<Outcome<UploadRow[]>> {
  const wanted = [...new Set(ids)];
  if (wanted.length === 0) return done([]);
  const rows = await tx
    .select()
    .from(uploads)
    .where(and(inArray(uploads.id, wanted), isNull(uploads.commissionId)))
    .for('update');
  const own = rows.filter((row) => row.browserId === browserId || (actor !== null && row.ownerId === actor.id));
  if (own.length === wanted.length) return done(own);
  const message = 'One of the files is no longer here. Take it off the list, add it again, and send.';
  return refuse('invalid', message, { uploads: message });
}

/** Puts the files with their commission. */
export async function claimUploads(
  tx: Transaction,
  commission: { id: string; customerId: string | null },
  files: readonly UploadRow[],
): Promise<void> {
  if (files.length === 0) return;
  await tx
    .update(uploads)
    .set({ commissionId: commission.id, ownerId: commission.customerId })
    .where(
      inArray(
        uploads.id,
        files.map((file) => file.id),
      ),
    );
}

/** Gives the files of a commission to its customer once the address is confirmed. */
export async function handOverUploads(tx: Transaction, commissionId: string, customerId: string): Promise<void> {
  await tx.update(uploads).set({ ownerId: customerId }).where(eq(uploads.commissionId, commissionId));
}
