import { and, asc, desc, eq, inArray, sum } from 'drizzle-orm';
import { nextStage, STAGE_ACTS, STAGE_OPERATIONS, type PieceStage } from '../../commission/making/making';
import { may, type Actor } from '../../commission/permissions';
import type { QuoteDraft } from '../../commission/pricing/quote-draft';
import { done, refuse, type Outcome } from '../../commission/problem';
import { findCommission, type CommissionRow } from '../commissions';
import type { Db } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { gates, minutesLog, photos, pieces, timers } from '../db/schema/making';
import type { GateRow } from './gates';
import { readAttempts, type PieceRow } from './pieces';
import { acceptedDrafts } from '../quote/promise';
import type { Services } from '../services';

const AT_THE_BENCH = ['booked', 'making', 'finished', 'rework'] as const;

/** One piece as the bench sees it. Masses g. No money, no address, no surname. */
export interface BenchPiece {
  number: number;
  stage: PieceStage;
  route: PieceStage[];
  next: PieceStage | null;
  nextAct: string | null;
  operation: string;
  targetMassG: number | null;
  toleranceG: number | null;
  measuredG: number | null;
}

/** One commission as the bench sees it. */
export interface BenchCommission {
  ref: string;
  title: string;
  deal: string;
  alloy: string;
  /** First name only: makers need no more. */
  for: string;
  dueOut: string | null;
  specification: string[];
  pieces: BenchPiece[];
  gateA: 'none' | 'open' | 'approved' | 'changes';
}

/** The bench page of one commission. */
export interface BenchPage extends BenchCommission {
  changesAsked: string | null;
  attempts: {
    number: number;
    piece: number | null;
    mouldNo: string | null;
    heatNo: string | null;
    result: string | null;
    cause: string | null;
  }[];
  photos: { id: string; caption: string; alt: string; stage: string; takenAt: string }[];
  /** The last entries, and the sum of all there are. */
  minutes: { operation: string; minutes: number; at: string }[];
  minutesInAll: number;
  timer: { operation: string; startedAt: string } | null;
}

/** Everything in hand, soonest due first. */
export async function listBench(services: Services, actor: Actor): Promise<Outcome<BenchCommission[]>> {
  if (!may(actor, 'bench:read'))
    return refuse(actor ? 'not-allowed' : 'sign-in-needed', 'The bench is for the studio’s makers.');
  const rows = await services.db
    .select()
    .from(commissions)
    .where(inArray(commissions.deal, [...AT_THE_BENCH]))
    .orderBy(commissions.leavesTo, commissions.ref);
  const inHand = await readInHand(
    services.db,
    rows.map((row) => row.id),
  );
  return done(rows.map((row) => benchOf(row, inHand(row.id))));
}

/** One commission's bench page, whitelisted: a maker's session cannot get more out of it. */
export async function readBench(
  services: Services,
  actor: Actor,
  ref: string | undefined,
): Promise<Outcome<BenchPage>> {
  const found = await findCommission(services, actor, ref, 'bench:read');
  if (!found.ok) return found;
  const { db } = services;
  const commission = found.value;
  const inHand = (await readInHand(db, [commission.id]))(commission.id);
  const { pieces: all, gate } = inHand;
  if (all.length === 0)
    return refuse(
      'not-found',
      'This commission has not come to the bench yet; it does once its first payment is booked.',
    );
  const numbers = new Map(all.map((piece) => [piece.id, piece.number]));
  const pictures = await db
    .select()
    .from(photos)
    .where(eq(photos.commissionId, commission.id))
    .orderBy(desc(photos.takenAt))
    .limit(30);
  const log = await db
    .select()
    .from(minutesLog)
    .where(eq(minutesLog.commissionId, commission.id))
    .orderBy(desc(minutesLog.at))
    .limit(8);
  const [whole] = await db
    .select({ minutes: sum(minutesLog.minutes) })
    .from(minutesLog)
    .where(eq(minutesLog.commissionId, commission.id));
  const [timer] = await db
    .select()
    .from(timers)
    .where(and(eq(timers.commissionId, commission.id), eq(timers.by, actor!.id)));
  return done({
    ...benchOf(commission, inHand),
    changesAsked: gate?.state === 'changes' ? gate.note : null,
    attempts: (await readAttempts(db, commission.id)).map((attempt) => ({
      number: attempt.number,
      piece: attempt.pieceId ? (numbers.get(attempt.pieceId) ?? null) : null,
      mouldNo: attempt.mouldNo,
      heatNo: attempt.heatNo,
      result: attempt.result,
      cause: attempt.cause,
    })),
    photos: pictures.map((photo) => ({
      id: photo.id,
      caption: photo.caption,
      alt: photo.alt,
      stage: photo.stage,
      takenAt: photo.takenAt.toISOString(),
    })),
    minutes: log.map((entry) => ({ operation: entry.operation, minutes: entry.minutes, at: entry.at.toISOString() })),
    minutesInAll: Number(whole?.minutes ?? 0),
    timer: timer ? { operation: timer.operation, startedAt: timer.startedAt.toISOString() } : null,
  });
}

function gateState(state: string | undefined): BenchPage['gateA'] {
  return state === 'open' || state === 'approved' || state === 'changes' ? state : 'none';
}

/** What the bench shows of a commission beside its own row. */
interface InHand {
  draft: QuoteDraft | null;
  pieces: PieceRow[];
  gate: GateRow | null;
}

/** Reads it for any number of commissions in three queries. */
async function readInHand(db: Db, ids: string[]): Promise<(id: string) => InHand> {
  const drafts = await acceptedDrafts(db, ids);
  const all = await db.select().from(pieces).where(inArray(pieces.commissionId, ids)).orderBy(asc(pieces.number));
  const rounds = await db
    .select()
    .from(gates)
    .where(and(inArray(gates.commissionId, ids), eq(gates.gate, 'A')))
    .orderBy(asc(gates.round));
  return (id) => ({
    draft: drafts.get(id) ?? null,
    pieces: all.filter((piece) => piece.commissionId === id),
    gate: rounds.findLast((round) => round.commissionId === id) ?? null,
  });
}

function benchOf(row: CommissionRow, { draft, pieces: all, gate }: InHand): BenchCommission {
  return {
    ref: row.ref,
    title: row.title,
    deal: row.deal,
    alloy: draft?.metal.name ?? row.alloy,
    for: row.customerName.split(/\s+/)[0] ?? '',
    dueOut: row.leavesTo,
    specification: draft?.specification ?? [],
    pieces: all.map(benchPiece),
    gateA: gateState(gate?.state),
  };
}

function benchPiece(piece: PieceRow): BenchPiece {
  const next = nextStage(piece.route, piece.stage);
  return {
    number: piece.number,
    stage: piece.stage,
    route: piece.route,
    next,
    nextAct: next ? STAGE_ACTS[next] : null,
    operation: STAGE_OPERATIONS[next ?? 'packed'],
    targetMassG: piece.targetMassG,
    toleranceG: piece.toleranceG,
    measuredG: piece.measured?.massG ?? null,
  };
}
