import { and, desc, eq, gt, isNull, ne, or } from 'drizzle-orm';
import { nextStage, type PieceStage, type ScrapCause } from '../../commission/making/making';
import type { CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { attempts, photos } from '../db/schema/making';
import { timesMoved } from '../history';
import { queueMail } from '../outbox';
import type { PieceRow } from './pieces';
import { pieceFacts } from '../quote/promise';
import type { Services } from '../services';

const OBJECT_DAYS = 5;

function about(commission: CommissionRow) {
  return { ref: commission.ref, title: commission.title, name: commission.customerName };
}

function leavesOf(commission: CommissionRow) {
  return commission.leavesFrom && commission.leavesTo
    ? { leaves: { from: commission.leavesFrom, to: commission.leavesTo } }
    : {};
}

/** Queues M14: work is about to start; the key facts once more, and some days to object. */
export async function queueStartMail(services: Services, tx: Transaction, commission: CommissionRow): Promise<void> {
  const at = services.now();
  await queueMail(tx, {
    letter: 'M14',
    to: commission.email,
    cause: `M14:${commission.id}`,
    commissionId: commission.id,
    at,
    data: {
      ...about(commission),
      resumed: false,
      facts: await pieceFacts(tx, commission),
      objectBy: new Date(at.getTime() + OBJECT_DAYS * 86_400_000).toISOString().slice(0, 10),
      ...leavesOf(commission),
    },
  });
}

/** Queues M19: every piece has reached `stage`. Its newest photos travel along. */
export async function queueProgressMail(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  progress: { stage: PieceStage; pieces: PieceRow[] },
): Promise<void> {
  const first = progress.pieces[0];
  const next = first ? nextStage(first.route, progress.stage) : null;
  const [tries] = await tx
    .select({ number: attempts.number })
    .from(attempts)
    .where(eq(attempts.commissionId, commission.id))
    .orderBy(desc(attempts.number))
    .limit(1);
  const finished = await timesMoved(tx, commission.id, 'T31');
  await queueMail(tx, {
    letter: 'M19',
    to: commission.email,
    // A re-pour and a piece that came back go through the same stages again and tell them again.
    cause: `M19:${commission.id}:${progress.stage}:${tries?.number ?? 0}:${finished.times}`,
    commissionId: commission.id,
    at: services.now(),
    data: {
      ...about(commission),
      stage: progress.stage,
      reached: progress.pieces.length,
      pieces: progress.pieces.length,
      ...(next ? { next } : {}),
      pictures: await newestPictures(tx, commission.id, { stage: progress.stage, since: finished.last }, 3),
      ...leavesOf(commission),
    },
  });
}

/** Queues M20: a casting failed, told plainly, with its picture and the new range. */
export async function queueScrapMail(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  scrap: {
    attemptId: string;
    piece: number;
    pieces: number;
    cause: ScrapCause;
    note?: string | undefined;
    photoId?: string | undefined;
    outerMoved: boolean;
  },
): Promise<void> {
  const [photo] = scrap.photoId ? await tx.select().from(photos).where(eq(photos.id, scrap.photoId)) : [];
  await queueMail(tx, {
    letter: 'M20',
    to: commission.email,
    cause: `M20:${scrap.attemptId}`,
    commissionId: commission.id,
    at: services.now(),
    data: {
      ...about(commission),
      cause: scrap.cause,
      ...(scrap.note ? { note: scrap.note } : {}),
      piece: scrap.piece,
      pieces: scrap.pieces,
      ...(photo ? { picture: { photoId: photo.id, caption: photo.caption, alt: photo.alt } } : {}),
      ...leavesOf(commission),
      outerMoved: scrap.outerMoved,
    },
  });
}

/**
 * The newest shared photos of one stage, for a letter; those of a casting that was scrapped are told by its own letter,
 * those taken before `since` were told when the piece was finished the first time.
 */
export async function newestPictures(
  tx: Transaction,
  commissionId: string,
  { stage, since }: { stage: string; since: Date | null },
  most: number,
) {
  const rows = await tx
    .select({ photoId: photos.id, caption: photos.caption, alt: photos.alt })
    .from(photos)
    .leftJoin(attempts, eq(attempts.id, photos.attemptId))
    .where(
      and(
        eq(photos.commissionId, commissionId),
        eq(photos.stage, stage),
        since ? gt(photos.takenAt, since) : undefined,
        eq(photos.shared, true),
        or(isNull(attempts.result), ne(attempts.result, 'scrapped')),
      ),
    )
    .orderBy(desc(photos.takenAt))
    .limit(most);
  return rows;
}
