import { and, desc, eq, isNull } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { hasReached, STAGE_ACTS, type PieceStage } from '../../commission/making/making';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import type { StageDone } from '../../commission/making/work-done';
import { findCommission, lockCommission, type CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { attempts, pieces } from '../db/schema/making';
import { findEntry } from './entries';
import { openGateA } from './gates';
import { moveDeal, recordEvent } from '../history';
import { checkStep } from './making-rules';
import { queueProgressMail, queueStartMail } from './making-mails';
import { readPieces, type PieceRow } from './pieces';
import type { Services } from '../services';

/** What a maker is told after a step. */
export interface StepDone {
  piece: number;
  stage: PieceStage;
}

/**
 * One piece reaches its next stage (T14, T15, T19 to T22, T27, T30). The rules are asked inside the
 * transaction; a second press of the same step answers like the first and writes nothing. All pieces of a
 * commission come from one pattern, so they reach that stage together.
 */
export async function reachStage(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: StageDone,
): Promise<Outcome<StepDone>> {
  const found = await findCommission(services, actor, ref, 'bench:work');
  if (!found.ok) return found;
  const now = services.now();
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    const all = await readPieces(tx, commission.id);
    const piece = all.find((each) => each.number === input.piece);
    if (!piece) return refuse('not-found', 'This commission has no piece of that number.');
    if (await findEntry(tx, commission.id, `stage-${input.to}`, input.clientId))
      return done({ piece: piece.number, stage: input.to });
    const rule = await checkStep(tx, commission, piece, input, { role: actor!.role, now });
    if (!rule.ok) return rule;
    if (rule.value === 'repeat') return done({ piece: piece.number, stage: piece.stage });
    await startMaking(services, tx, commission, actor);
    const moved = input.to === 'pattern' ? all.filter((each) => each.stage === 'waiting') : [piece];
    await writeStep(tx, commission, moved, input, { actor, now });
    const after = all.map((each) => (moved.includes(each) ? { ...each, stage: input.to } : each));
    await tellCustomer(services, tx, commission, after, input.to);
    return done({ piece: piece.number, stage: input.to });
  });
}

/** T14: the first work on a booked commission starts the making and writes to the customer. */
export async function startMaking(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  actor: Actor,
): Promise<void> {
  if (commission.deal !== 'booked') return;
  const at = services.now();
  const moved = await moveDeal(tx, commission, {
    move: 'T14',
    mover: actor?.role === 'owner' ? 'owner' : 'maker',
    actor,
    sentence: 'Work on the piece has started.',
    public: true,
    at,
  });
  if (!moved.ok) throw new Error(`the making of ${commission.ref} could not start: ${moved.problem.message}`);
  await queueStartMail(services, tx, commission);
}

async function writeStep(
  tx: Transaction,
  commission: CommissionRow,
  moved: PieceRow[],
  input: StageDone,
  by: { actor: Actor; now: Date },
): Promise<void> {
  const [piece] = moved;
  if (!piece) throw new Error('a step without a piece');
  for (const each of moved) {
    await tx
      .update(pieces)
      .set({ stage: input.to, updatedAt: by.now, ...(input.to === 'inspected' ? { measured: measuredOf(input) } : {}) })
      .where(eq(pieces.id, each.id));
  }
  await writeAttempt(tx, commission, piece, input, by);
  if (input.to === 'pattern') await openGateA(tx, commission, by);
  const which = input.to === 'pattern' || commission.pieces === 1 ? '' : `: piece ${piece.number}`;
  await recordEvent(tx, {
    commissionId: commission.id,
    code: `stage-${input.to}`,
    actor: by.actor,
    from: piece.stage,
    to: input.to,
    sentence: `${STAGE_ACTS[input.to]}${which}.`,
    public: true,
    at: by.now,
    data: { piece: piece.number, clientId: input.clientId, ...(input.note ? { note: input.note } : {}) },
  });
}

function measuredOf(input: StageDone): PieceRow['measured'] {
  return {
    massG: input.massG,
    ...(input.balanceMm === undefined ? {} : { balanceMm: input.balanceMm }),
    ...(input.edge ? { edge: input.edge } : {}),
    ...(input.note ? { note: input.note } : {}),
  };
}

async function writeAttempt(
  tx: Transaction,
  commission: CommissionRow,
  piece: PieceRow,
  input: StageDone,
  by: { actor: Actor; now: Date },
) {
  if (input.to === 'mould') {
    const [last] = await tx
      .select({ number: attempts.number })
      .from(attempts)
      .where(eq(attempts.commissionId, commission.id))
      .orderBy(desc(attempts.number))
      .limit(1);
    const number = (last?.number ?? 0) + 1;
    const mouldNo = input.mouldNo || `${commission.ref}/${number}`;
    await tx.insert(attempts).values({
      id: uuidv7(),
      commissionId: commission.id,
      pieceId: piece.id,
      number,
      family: commission.family,
      mouldNo,
      mouldAt: by.now,
      by: by.actor!.id,
    });
  }
  const open = and(eq(attempts.pieceId, piece.id), isNull(attempts.result));
  if (input.to === 'poured') {
    await tx
      .update(attempts)
      .set({ pouredAt: by.now, heatNo: input.heatNo ?? null, pouredMassG: input.massG ?? null })
      .where(open);
  }
  if (input.to === 'sound') {
    await tx
      .update(attempts)
      .set({ result: 'sound', castMassG: input.massG ?? null, closedAt: by.now })
      .where(open);
  }
}

/** Stages whose completion by every piece the customer hears of by mail; the pattern has its own letter. */
const TOLD: ReadonlySet<PieceStage> = new Set([
  'mould',
  'poured',
  'sound',
  'fettled',
  'hardened',
  'finished',
  'patinated',
  'hafted',
]);

async function tellCustomer(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  all: PieceRow[],
  stage: PieceStage,
): Promise<void> {
  if (!TOLD.has(stage)) return;
  const concerned = all.filter((piece) => piece.route.includes(stage));
  const reached = concerned.filter((piece) => hasReached(piece.route, piece.stage, stage));
  if (reached.length === concerned.length)
    await queueProgressMail(services, tx, commission, { stage, pieces: concerned });
}
