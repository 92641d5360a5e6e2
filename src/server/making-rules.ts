import { and, desc, eq } from 'drizzle-orm';
import { nextStage, STAGE_ACTS } from '../commission/making';
import type { Role } from '../commission/permissions';
import { done, refuse, type Outcome } from '../commission/problem';
import type { StageDone } from '../commission/work-done';
import type { CommissionRow } from './commissions';
import type { Transaction } from './db/client';
import { gates, photos } from './db/schema/making';
import { readBalance } from './ledger';
import type { PieceRow } from './pieces';

/** Whether a piece may take this step now; the sentence says what is missing. `repeat` is a second press of the same step. */
export async function checkStep(
  tx: Transaction,
  commission: CommissionRow,
  piece: PieceRow,
  input: StageDone,
  by: { role: Role; now: Date },
): Promise<Outcome<'step' | 'repeat'>> {
  if (piece.stage === input.to) return done('repeat');
  const deals = input.to === 'packed' ? ['booked', 'making', 'rework', 'finished'] : ['booked', 'making', 'rework'];
  if (!deals.includes(commission.deal)) {
    return refuse('conflict', 'This commission is not at the bench. Reload the page to see where it stands.');
  }
  if (piece.stage !== input.from || nextStage(piece.route, piece.stage) !== input.to) {
    const expected = nextStage(piece.route, piece.stage);
    return refuse(
      'stale',
      `Piece ${piece.number} has moved on. Its next step is: ${expected ? STAGE_ACTS[expected].toLowerCase() : 'nothing, it is packed'}. Reload the page.`,
    );
  }
  if (input.to === 'pattern')
    return needPhotos(
      tx,
      commission,
      'pattern',
      'Take at least one photo of the pattern with a scale before you send it to the customer.',
    );
  if (input.to === 'mould') return checkMould(tx, commission, piece, by);
  if (input.to === 'inspected') return checkInspection(tx, commission, piece, input);
  if (input.to === 'packed') return checkPacking(commission);
  return done('step');
}

async function needPhotos(
  tx: Transaction,
  commission: CommissionRow,
  stage: string,
  sentence: string,
): Promise<Outcome<'step'>> {
  const [photo] = await tx
    .select({ id: photos.id })
    .from(photos)
    .where(and(eq(photos.commissionId, commission.id), eq(photos.stage, stage)))
    .limit(1);
  return photo ? done('step') : refuse('conflict', sentence);
}

async function checkMould(
  tx: Transaction,
  commission: CommissionRow,
  piece: PieceRow,
  by: { role: Role; now: Date },
): Promise<Outcome<'step'>> {
  if (piece.route.includes('pattern')) {
    const [gate] = await tx
      .select()
      .from(gates)
      .where(and(eq(gates.commissionId, commission.id), eq(gates.gate, 'A')))
      .orderBy(desc(gates.round))
      .limit(1);
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
  // The owner decides on credit, so the owner's own press goes through; the history names who pressed.
  if (owed && by.role !== 'owner')
    return refuse(
      'conflict',
      `A stage payment that covers this step is still open. Ask the owner before you make the mould.`,
    );
  return done('step');
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
  return needPhotos(
    tx,
    commission,
    'inspected',
    'Take at least one photo of the finished piece before it passes inspection.',
  );
}

function checkPacking(commission: CommissionRow): Outcome<'step'> {
  return commission.deal === 'finished'
    ? done('step')
    : refuse('conflict', 'Tell the customer that the piece is finished first; packing comes after.');
}
