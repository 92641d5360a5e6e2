import { and, desc, eq, inArray, isNotNull, isNull, like, max } from 'drizzle-orm';
import type { Balance } from '../../commission/balance';
import { hasReached, PIECE_STAGES, nextStage, STAGE_OPERATIONS } from '../../commission/making/making';
import { currencySchema } from '../../commission/money';
import type { TurnFacts, TurnPieces, WhoseTurn } from '../../commission/turn/turn-facts';
import { whoseTurn } from '../../commission/turn/whose-turn';
import type { CommissionRow } from '../commissions';
import type { Db } from '../db/client';
import { events, questions } from '../db/schema/commissions';
import { attempts, gates, pieces } from '../db/schema/making';
import { quotes } from '../db/schema/quotes';
import { readBalances } from '../money/ledger';

type PieceRow = typeof pieces.$inferSelect;

/** Whose turn it is on each of these commissions, by id; a fixed number of queries however many there are. */
export async function turnsOf(db: Db, rows: readonly CommissionRow[], now: Date): Promise<Map<string, WhoseTurn>> {
  const known = await loadAll(
    db,
    rows.map((row) => row.id),
    now,
  );
  return new Map(rows.map((row) => [row.id, whoseTurn(factsFor(row, known, now))]));
}

/** Whose turn it is on one commission. */
export async function turnOf(db: Db, row: CommissionRow, now: Date): Promise<WhoseTurn> {
  return (await turnsOf(db, [row], now)).get(row.id)!;
}

type Loaded = Awaited<ReturnType<typeof loadAll>>;

async function loadAll(db: Db, ids: string[], now: Date) {
  if (ids.length === 0) ids = ['00000000-0000-0000-0000-000000000000'];
  const [moves, open, live, openGates, allPieces, results, balances] = [
    await db
      .select({ id: events.commissionId, to: events.to, at: max(events.at) })
      .from(events)
      .where(and(inArray(events.commissionId, ids), like(events.code, 'T%'), isNotNull(events.to)))
      .groupBy(events.commissionId, events.to),
    await db
      .select({ id: questions.commissionId, askedAt: questions.askedAt })
      .from(questions)
      .where(and(inArray(questions.commissionId, ids), eq(questions.required, true), isNull(questions.answer))),
    await db
      .select({ id: quotes.commissionId, revision: quotes.revision, sentAt: quotes.sentAt, until: quotes.validUntil })
      .from(quotes)
      .where(and(inArray(quotes.commissionId, ids), eq(quotes.state, 'sent'))),
    await db.select().from(gates).where(inArray(gates.commissionId, ids)).orderBy(gates.openedAt),
    await db.select().from(pieces).where(inArray(pieces.commissionId, ids)),
    await db
      .select({ id: attempts.commissionId, pieceId: attempts.pieceId, result: attempts.result })
      .from(attempts)
      .where(inArray(attempts.commissionId, ids))
      .orderBy(desc(attempts.number)),
    await readBalances(db, ids, now),
  ];
  return { moves, open, live, openGates, allPieces, results, balances };
}

function factsFor(row: CommissionRow, known: Loaded, now: Date): TurnFacts {
  const own = <T extends { id: string }>(list: T[]) => list.filter((item) => item.id === row.id);
  const asked = own(known.open);
  const live = own(known.live)[0];
  const since = own(known.moves).find((move) => move.to === row.deal)?.at ?? row.createdAt;
  const gatesOf = known.openGates.filter((gate) => gate.commissionId === row.id);
  return {
    deal: row.deal,
    since,
    now,
    questions: asked[0] ? { open: asked.length, askedAt: asked[0].askedAt } : null,
    quote: live ? { revision: live.revision, sentAt: live.sentAt, validUntil: live.until } : null,
    payment: nextPayment(known.balances.get(row.id)),
    gate: gateOf(gatesOf),
    pieces: piecesOf(
      known.allPieces.filter((piece) => piece.commissionId === row.id),
      own(known.results),
      latest([since, ...gatesOf.map((gate) => gate.decidedAt)]),
    ),
    heldUntil: row.heldUntil,
  };
}

function nextPayment(balance: Balance | undefined): TurnFacts['payment'] {
  const stage = balance?.stages.find((each) => each.state !== 'paid' && each.state !== 'later');
  if (!stage) return null;
  const { label, owedMinor, dueAt, state } = stage;
  return { label, owedMinor, currency: currencySchema.parse(stage.currency), dueAt, state };
}

function gateOf(rows: (typeof gates.$inferSelect)[]): TurnFacts['gate'] {
  const last = rows.at(-1);
  if (!last || (last.state !== 'open' && last.state !== 'changes')) return null;
  return { gate: last.gate, state: last.state, at: last.decidedAt ?? last.openedAt };
}

function latest(instants: (Date | null)[]): Date {
  return new Date(Math.max(...instants.map((instant) => instant?.getTime() ?? 0)));
}

function piecesOf(
  rows: PieceRow[],
  results: { pieceId: string | null; result: string | null }[],
  free: Date,
): TurnPieces | null {
  if (rows.length === 0) return null;
  const isDone = (piece: PieceRow) => nextStage(piece.route, piece.stage) === null;
  const left = rows.filter((piece) => !isDone(piece));
  const [least] = [...left].sort((a, b) => PIECE_STAGES.indexOf(a.stage) - PIECE_STAGES.indexOf(b.stage));
  const next = least ? nextStage(least.route, least.stage) : null;
  const lastResult = results.find((attempt) => attempt.pieceId === least?.id)?.result;
  return {
    total: rows.length,
    done: rows.length - left.length,
    nextWork: next ? STAGE_OPERATIONS[next] : null,
    ahead: next ? left.filter((piece) => !hasReached(piece.route, piece.stage, next)).length : 0,
    scrapped: lastResult === 'scrapped',
    since: latest([free, ...(least ? [least.updatedAt] : rows.map((piece) => piece.updatedAt))]),
  };
}
