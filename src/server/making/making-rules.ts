import { and, eq, gt } from 'drizzle-orm';
import type { DealState } from '../../commission/deal';
import { nextStage, STAGE_ACTS } from '../../commission/making/making';
import type { Role } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import type { StageDone } from '../../commission/making/work-done';
import type { CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { photos } from '../db/schema/making';
import { timesMoved } from '../history';
import { latestGate, patternPhotos } from './gates';
import { readBalance } from '../money/ledger';
import type { PieceRow } from './pieces';

/** States of the deal in which pieces go on from stage to stage. */
export const IN_WORK: readonly DealState[] = ['booked', 'making', 'rework'];

export const NOT_AT_THE_BENCH = 'This commission is not at the bench just now. Reload the page to see where it stands.';

/** Whether a piece may take this step now; the sentence says what is missing. `repeat` is a second press of the same step. */
export async function checkStep(
  tx: Transaction,
  commission: CommissionRow,
  piece: PieceRow,
  input: StageDone,
  by: { role: Role; now: Date },
): Promise<Outcome<'step' | 'repeat'>> {
  if (piece.stage === input.to) return done('repeat');
  // Packing is the one step left once the customer has been told that the piece is finished.
  const states: readonly DealState[] = input.to === 'packed' ? [...IN_WORK, 'finished'] : IN_WORK;
  if (!states.includes(commission.deal)) return refuse('conflict', NOT_AT_THE_BENCH);
  if (piece.stage !== input.from || nextStage(piece.route, piece.stage) !== input.to) {
    const expected = nextStage(piece.route, piece.stage);
    return refuse(
      'stale',
      `Piece ${piece.number} has moved on. Its next step is: ${expected ? STAGE_ACTS[expected].toLowerCase() : 'nothing, it is packed'}. Reload the page.`,
    );
  }
  if (input.to === 'pattern') return checkPattern(tx, commission);
  if (input.to === 'mould') return checkMould(tx, commission, piece, input, by);
  if (input.to === 'inspected') return checkInspection(tx, commission, piece, input);
  if (input.to === 'packed') return checkPacking(commission);
  return done('step');
}

async function checkPattern(tx: Transaction, commission: CommissionRow): Promise<Outcome<'step'>> {
  const last = await latestGate(tx, commission.id, 'A');
  const shown = await patternPhotos(tx, commission.id, last);
  if (shown.length > 0) return done('step');
  return refuse(
    'conflict',
    last?.state === 'changes'
      ? 'Take at least one photo of the changed pattern before you send it to the customer again.'
      : 'Take at least one photo of the pattern with a scale before you send it to the customer.',
  );
}

async function checkMould(
  tx: Transaction,
  commission: CommissionRow,
  piece: PieceRow,
  input: StageDone,
  by: { role: Role; now: Date },
): Promise<Outcome<'step'>> {
  if (piece.route.includes('pattern')) {
    const gate = await latestGate(tx, commission.id, 'A');
    if (gate?.state !== 'approved') {
      return refuse(
        'conflict',
        'The customer has not approved the pattern yet. No mould is made before that; they have been asked.',
      );
    }
  }
  const owed = (await readBalance(tx, commission.id, by.now)).stages.find(
    (stage) => stage.dueAt !== null && stage.owedMinor > 0,
  );
  if (!owed) return done('step');
  if (by.role !== 'owner')
    return refuse(
      'conflict',
      'A stage payment that covers this step is still open. Ask the owner before you make the mould.',
    );
  // The owner decides on credit, with a reason that the history keeps.
  if (input.note) return done('step');
  const why = 'A stage payment is still open. Say in the note why the mould is made before it has come.';
  return refuse('invalid', why, { note: why });
}

async function checkInspection(
  tx: Transaction,
  commission: CommissionRow,
  piece: PieceRow,
  input: StageDone,
): Promise<Outcome<'step'>> {
  if (input.massG === undefined) {
    return refuse('invalid', 'Weigh the piece first: the mass is part of what was promised.', {
      massG: 'Weigh the piece and enter its mass in grams.',
    });
  }
  const off = piece.targetMassG === null ? 0 : Math.abs(input.massG - piece.targetMassG) - (piece.toleranceG ?? 0);
  if (off > 0 && !input.note) {
    return refuse(
      'invalid',
      `The promise is ${piece.targetMassG} g ± ${piece.toleranceG ?? 0} g. Say in the note why this piece may pass, or take more off.`,
      {
        massG: 'Outside what was promised.',
        note: 'Needed when the mass is outside the promise.',
      },
    );
  }
  // A piece that came back is looked at anew: photos of the first time say nothing of it.
  const { last } = await timesMoved(tx, commission.id, 'T31');
  const [photo] = await tx
    .select({ id: photos.id })
    .from(photos)
    .where(
      and(
        eq(photos.commissionId, commission.id),
        eq(photos.stage, 'inspected'),
        last ? gt(photos.takenAt, last) : undefined,
      ),
    )
    .limit(1);
  return photo
    ? done('step')
    : refuse('conflict', 'Take at least one photo of the finished piece before it passes inspection.');
}

function checkPacking(commission: CommissionRow): Outcome<'step'> {
  return commission.deal === 'finished'
    ? done('step')
    : refuse('conflict', 'Tell the customer that the piece is finished first; packing comes after.');
}
