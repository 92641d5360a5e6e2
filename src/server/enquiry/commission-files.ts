import { count, eq } from 'drizzle-orm';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { claimUploads, findClaimable } from './claim-uploads';
import { findCommission, lockCommission } from '../commissions';
import { uploads } from '../db/schema/commissions';
import { recordEvent } from '../history';
import type { Services } from '../services';
import { limitUpload } from '../uploads/limit-upload';
import { receiveUpload, type UploadAnswer } from '../uploads/receive-upload';

const TAKES_FILES = new Set([
  'enquiry',
  'asking',
  'estimated',
  'quoted',
  'agreed',
  'booked',
  'making',
  'held',
  'issue',
]);

const MOST_FILES = 120;

/**
 * Takes in one more file from the customer of a commission and puts it with that commission at once.
 * The same client id again answers as the first time did.
 */
export async function addCommissionFile(
  services: Services,
  actor: Actor,
  browserId: string,
  ref: string | undefined,
  request: Request,
): Promise<Outcome<UploadAnswer>> {
  const found = await findCommission(services, actor, ref, 'commission:write-message');
  if (!found.ok) return found;
  if (!TAKES_FILES.has(found.value.deal)) {
    return refuse(
      'conflict',
      'This commission takes no more files. Write us a message if there is something we should see.',
    );
  }
  if (await isFull(services, found.value.id)) {
    return refuse(
      'too-many',
      `${MOST_FILES} files are with this commission already. Write us a message about the rest.`,
    );
  }
  const allowed = await limitUpload(services, actor!.id, request);
  if (!allowed.ok) return allowed;
  const received = await receiveUpload(services, actor, browserId, request);
  if (!received.ok) return received;
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    const [row] = await tx.select().from(uploads).where(eq(uploads.id, received.value.id));
    if (row?.commissionId === commission.id) return received;
    const files = await findClaimable(tx, [received.value.id], browserId, actor);
    if (!files.ok) return files;
    await claimUploads(tx, commission, files.value);
    await recordEvent(tx, {
      commissionId: commission.id,
      code: 'file',
      actor,
      sentence: `A file was added: ${received.value.name}`,
      public: true,
      at: services.now(),
      data: { upload: received.value.id, sha256: row?.sha256 },
    });
    return done(received.value);
  });
}

async function isFull({ db }: Services, commissionId: string): Promise<boolean> {
  const [held] = await db.select({ files: count() }).from(uploads).where(eq(uploads.commissionId, commissionId));
  return (held?.files ?? 0) >= MOST_FILES;
}
