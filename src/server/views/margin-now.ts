import { and, eq, inArray } from 'drizzle-orm';
import type { DealState } from '../../commission/deal';
import { PIECE_STAGES, type PieceStage } from '../../commission/making/making';
import { may, type Actor } from '../../commission/permissions';
import { marginNow, type MarginNow } from '../../commission/pricing/margin-now';
import { done, refuse, type Outcome } from '../../commission/problem';
import type { CommissionRow } from '../commissions';
import type { Db } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { quotes } from '../db/schema/quotes';
import { readAttempts, readPieces, type AttemptRow } from '../making/pieces';
import { acceptedStages, readBalance } from '../money/ledger';
import { bodyOf } from '../quote/quote-body';
import type { Services } from '../services';

/** States in which the work may still earn more or less than was quoted. */
const OPEN: readonly DealState[] = ['agreed', 'booked', 'making', 'held', 'finished', 'sent', 'lost'];

/** A commission's margin as it stands, with what an owner must know beside it. */
export interface OpenMargin extends MarginNow {
  /** Some piece is not fettled yet, so that what was received can be held against what is committed. */
  beforeFettling: boolean;
  /** Label of the stage payment still to come next, which covers what is not covered now. */
  nextStage: string | null;
}

/** The margin now expected on one open commission; null before acceptance and once the work is delivered or over. */
export async function marginOf(db: Db, row: CommissionRow, now: Date): Promise<OpenMargin | null> {
  if (!OPEN.includes(row.deal)) return null;
  const [quote] = await db
    .select()
    .from(quotes)
    .where(and(eq(quotes.commissionId, row.id), eq(quotes.state, 'accepted')));
  if (!quote) return null;
  const { stages } = await readBalance(db, row.id, now);
  const paid = (await acceptedStages(db, row.id)).map(({ id, netMinor, grossMinor }) => ({
    netMinor,
    grossMinor,
    paidMinor: stages.find((stage) => stage.id === id)?.paidMinor ?? 0,
  }));
  const pieces = await readPieces(db, row.id);
  return {
    ...marginNow(bodyOf(quote), (await readAttempts(db, row.id)).map(pourSoFar), paid),
    beforeFettling: pieces.length === 0 || pieces.some((piece) => isBefore(piece.stage, 'fettled')),
    nextStage: stages.find((stage) => stage.owedMinor > 0)?.label ?? null,
  };
}

function pourSoFar(attempt: AttemptRow) {
  const found = PIECE_STAGES.find((stage) => stage === attempt.foundAt);
  return {
    poured: attempt.pouredAt !== null || attempt.result !== null,
    result: attempt.result,
    late: found !== undefined && !isBefore(found, 'fettled'),
  };
}

function isBefore(stage: PieceStage, other: PieceStage): boolean {
  return PIECE_STAGES.indexOf(stage) < PIECE_STAGES.indexOf(other);
}

/** The margins of all open commissions, by reference. Owners only: makers and the bookkeeper see no cost. */
export async function readMargins(services: Services, actor: Actor): Promise<Outcome<Map<string, OpenMargin>>> {
  if (!may(actor, 'quote:write'))
    return refuse(actor ? 'not-allowed' : 'sign-in-needed', 'What the work earns is for the owners.');
  const { db } = services;
  const rows = await db
    .select()
    .from(commissions)
    .where(inArray(commissions.deal, [...OPEN]));
  const now = services.now();
  const pairs = await Promise.all(rows.map(async (row) => [row.ref, await marginOf(db, row, now)] as const));
  return done(new Map(pairs.filter((pair): pair is [string, OpenMargin] => pair[1] !== null)));
}
