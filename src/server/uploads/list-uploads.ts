import { and, asc, eq, isNull } from 'drizzle-orm';
import { uploads } from '../db/schema/commissions';
import type { Services } from '../services';
import { answerOf, type UploadAnswer } from './receive-upload';

/** The files this browser has sent that no enquiry holds yet, in the order they came. */
export async function listUnusedUploads({ db }: Pick<Services, 'db'>, browserId: string): Promise<UploadAnswer[]> {
  const rows = await db
    .select()
    .from(uploads)
    .where(and(eq(uploads.browserId, browserId), isNull(uploads.commissionId)))
    .orderBy(asc(uploads.createdAt), asc(uploads.id))
    .limit(100);
  return rows.map(answerOf);
}
