import { and, desc, eq, isNull } from 'drizzle-orm';
import { SCRAP_CAUSES, stageAfterScrap, STAGE_ACTS, type PieceStage } from '../../commission/making/making';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import type { Scrap } from '../../commission/making/work-done';
import { findCommission, lockCommission, type CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { attempts, photos, pieces } from '../db/schema/making';
import { findEntry } from './entries';
import { recordEvent } from '../history';
import { queueScrapMail } from './making-mails';
import { IN_WORK, NOT_AT_THE_BENCH } from './making-rules';
import { readPieces, type AttemptRow, type PieceRow } from './pieces';
import { currentRates } from '../pricing/rates';
import type { Services } from '../services';
import type { StepDone } from './making';

const BEFORE_POUR: ReadonlySet<PieceStage> = new Set(['waiting', 'pattern', 'mould']);

/**
 * T23 and T29: a casting is given up, with its cause. Its attempt is closed, the piece goes back to the
 * mould, the promise gains one re-pour cycle and the customer is told plainly. Nothing is charged.
 */
export async function scrapCasting(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: Scrap,
): Promise<Outcome<StepDone>> {
  const found = await findCommission(services, actor, ref, 'bench:work');
  if (!found.ok) return found;
  const now = services.now();
  const { throughput } = await currentRates(services.db);
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    const all = await readPieces(tx, commission.id);
    const piece = all.find((each) => each.number === input.piece);
    if (!piece) return refuse('not-found', 'This commission has no piece of that number.');
    if (await findEntry(tx, commission.id, 'T23', input.clientId))
      return done({ piece: piece.number, stage: piece.stage });
    if (!IN_WORK.includes(commission.deal)) return refuse('conflict', NOT_AT_THE_BENCH);
    if (piece.stage !== input.from)
      return refuse('stale', `Piece ${piece.number} has moved on since the page was opened. Reload it and look again.`);
    if (BEFORE_POUR.has(piece.stage))
      return refuse('conflict', 'Nothing has been poured for this piece, so there is no casting to scrap.');
    const attempt = await openOrSoundAttempt(tx, piece);
    if (!attempt)
      return refuse('conflict', 'There is no pour on record for this piece. Ask the owner to put the record right.');
    if (!(await ownPhoto(tx, commission.id, attempt.id, input.photo)))
      return refuse('invalid', 'The photo picked for this casting is not one of this commission’s. Pick another.', {
        photo: 'Pick one of the photos shown.',
      });
    const back = stageAfterScrap(piece.route);
    await closeAttempt(tx, attempt, input, now);
    await tx.update(pieces).set({ stage: back, measured: null, updatedAt: now }).where(eq(pieces.id, piece.id));
    const moved = await movePromise(tx, commission, throughput.repourWeeks, now);
    await writeScrap(services, tx, moved, { piece, attempt, input, actor, back, pieces: all.length });
    return done({ piece: piece.number, stage: back });
  });
}

/** Puts the photo that shows the fault with its attempt. False when it is none of this commission's. */
async function ownPhoto(tx: Transaction, commissionId: string, attemptId: string, photo?: string): Promise<boolean> {
  if (!photo) return true;
  const rows = await tx
    .update(photos)
    .set({ attemptId })
    .where(and(eq(photos.id, photo), eq(photos.commissionId, commissionId)))
    .returning({ id: photos.id });
  return rows.length > 0;
}

async function openOrSoundAttempt(tx: Transaction, piece: PieceRow): Promise<AttemptRow | null> {
  const [open] = await tx
    .select()
    .from(attempts)
    .where(and(eq(attempts.pieceId, piece.id), isNull(attempts.result)));
  if (open) return open;
  const [sound] = await tx
    .select()
    .from(attempts)
    .where(and(eq(attempts.pieceId, piece.id), eq(attempts.result, 'sound')))
    .orderBy(desc(attempts.number))
    .limit(1);
  return sound ?? null;
}

async function closeAttempt(tx: Transaction, attempt: AttemptRow, input: Scrap, now: Date): Promise<void> {
  await tx
    .update(attempts)
    .set({ result: 'scrapped', cause: input.cause, causeNote: input.note ?? null, foundAt: input.from, closedAt: now })
    .where(eq(attempts.id, attempt.id));
}

/** The later end of the promise moves by one re-pour cycle; the early end stays, since it promises nothing. */
async function movePromise(
  tx: Transaction,
  commission: CommissionRow,
  weeks: number,
  now: Date,
): Promise<CommissionRow> {
  if (!commission.leavesTo) return commission;
  const to = new Date(`${commission.leavesTo}T00:00:00Z`);
  const leavesTo = new Date(to.getTime() + weeks * 7 * 86_400_000).toISOString().slice(0, 10);
  await tx.update(commissions).set({ leavesTo, updatedAt: now }).where(eq(commissions.id, commission.id));
  return { ...commission, leavesTo };
}

interface ScrapFacts {
  piece: PieceRow;
  attempt: AttemptRow;
  input: Scrap;
  actor: Actor;
  back: PieceStage;
  pieces: number;
}

async function writeScrap(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  facts: ScrapFacts,
): Promise<void> {
  const { input, piece, attempt } = facts;
  const cause = SCRAP_CAUSES[input.cause];
  await recordEvent(tx, {
    commissionId: commission.id,
    code: 'T23',
    actor: facts.actor,
    from: input.from,
    to: facts.back,
    sentence: `${facts.pieces === 1 ? 'The casting' : `Piece ${piece.number}`} was scrapped after “${STAGE_ACTS[input.from].toLowerCase()}”: ${cause.name.toLowerCase()}. ${cause.plain} It is poured again at no charge.`,
    public: true,
    at: services.now(),
    data: {
      piece: piece.number,
      attempt: attempt.number,
      cause: input.cause,
      clientId: input.clientId,
      ...(input.photo ? { photo: input.photo } : {}),
    },
  });
  await queueScrapMail(services, tx, commission, {
    attemptId: attempt.id,
    piece: piece.number,
    pieces: facts.pieces,
    cause: input.cause,
    note: input.note,
    photoId: input.photo,
    outerMoved: commission.leavesTo !== null,
  });
}
