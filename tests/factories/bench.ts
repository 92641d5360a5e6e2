import { eq } from 'drizzle-orm';
import { nextStage, type PieceStage } from '../../src/commission/making/making';
import type { QuoteDraft } from '../../src/commission/pricing/quote-draft';
import { gateDecisionSchema, decideGate, latestGate } from '../../src/server/making/gates';
import { dispatchCommission, finishCommission } from '../../src/server/making/finishing';
import { reachStage } from '../../src/server/making/making';
import { photoFieldsSchema, storePhoto } from '../../src/server/making/photos';
import { readAttempts, readPieces } from '../../src/server/making/pieces';
import { scrapCasting } from '../../src/server/making/scrap';
import { mails } from '../../src/server/db/schema/studio';
import type { Outcome } from '../../src/commission/problem';
import { scrapSchema, stageDoneSchema, dispatchSchema } from '../../src/commission/making/work-done';
import { commission, type Person } from '../server/deal/deal-setting';
import { agreed, payDue, type PayingStudio } from './paying-studio';

let counter = 0;
/** An id as a page gives its entries. */
export const entryId = (): string => `entry-${String((counter += 1)).padStart(6, '0')}`;

export function must<T>(outcome: Outcome<T>): T {
  if (outcome.ok) return outcome.value;
  throw new Error(`${outcome.problem.code}: ${outcome.problem.message}`);
}

/** A commission whose first payment is booked. */
export async function booked(
  studio: PayingStudio,
  change?: (draft: QuoteDraft) => QuoteDraft,
  asked: Record<string, unknown> = {},
): Promise<string> {
  const ref = await agreed(studio, change, asked);
  await payDue(studio, ref);
  return ref;
}

/** A quote that has no gate A: nothing is paid for the pattern to be shown. */
export const withoutGate = (draft: QuoteDraft): QuoteDraft => ({
  ...draft,
  outOfRangeReason: 'The pattern is at hand.',
  lines: draft.lines.map((line) =>
    line.id === 'gate-a' ? { ...line, minutes: 0, zeroReason: 'The studio’s own pattern, shown before.' } : line,
  ),
});

/** A photo of a stage, as if its sizes were stored; its id. The hash is its own unless given. */
export async function photograph(
  studio: PayingStudio,
  ref: string,
  stage: PieceStage,
  more: { piece?: number; sha256?: string; caption?: string } = {},
): Promise<string> {
  const clientId = entryId();
  const { sha256 = clientId.padEnd(64, '0'), caption = `Photo of ${stage}`, piece } = more;
  const fields = photoFieldsSchema.parse({ clientId, stage, caption, ...(piece ? { piece } : {}) });
  const key = 'photos/00/0190c0de-0000-7000-8000-000000000000.webp';
  const size = { key, width: 320, height: 240 };
  const files = { large: size, medium: size, thumb: size };
  const { id } = await commission(studio, ref);
  return must(await storePhoto(studio.services, studio.maker, id, { fields, sha256, files })).id;
}

export async function pieceOf(studio: PayingStudio, ref: string, number = 1) {
  const all = await readPieces(studio.services.db, (await commission(studio, ref)).id);
  return all.find((piece) => piece.number === number)!;
}

/** Presses the button of a stage as the page shows it; whatever it answers. */
export async function press(
  studio: PayingStudio,
  ref: string,
  to: PieceStage,
  more: Partial<Record<'piece' | 'massG' | 'balanceMm', number>> & {
    from?: PieceStage;
    note?: string;
    heatNo?: string;
    clientId?: string;
    by?: Person;
  } = {},
) {
  const { by = studio.maker, piece = 1, ...rest } = more;
  const from = more.from ?? (await pieceOf(studio, ref, piece)).stage;
  const input = stageDoneSchema.parse({ clientId: entryId(), piece, from, to, ...rest });
  return reachStage(studio.services, by, ref, input);
}

/** The customer’s answer on the pictures of the newest round. */
export async function answerGate(
  studio: PayingStudio,
  ref: string,
  decision: 'approve' | 'changes',
  more: { note?: string; photoSet?: string; by?: Person } = {},
) {
  const { id } = await commission(studio, ref);
  const gate = await latestGate(studio.services.db, id, 'A');
  const { by = studio.customer, ...rest } = more;
  const input = gateDecisionSchema.parse({ photoSet: gate?.photoSetSha256 ?? '0'.repeat(64), decision, ...rest });
  return decideGate(studio.services, by, ref, input);
}

/** Brings a booked commission to the mould: pattern shown and approved, the second stage paid. */
export async function toMould(studio: PayingStudio, ref: string): Promise<void> {
  const piece = await pieceOf(studio, ref);
  if (piece.route.includes('pattern')) {
    await photograph(studio, ref, 'pattern');
    must(await press(studio, ref, 'pattern'));
    must(await answerGate(studio, ref, 'approve'));
    await payDue(studio, ref);
  }
}

/** Presses stage after stage until a piece has reached `to`; masses as promised. */
export async function bring(studio: PayingStudio, ref: string, to: PieceStage, number = 1): Promise<void> {
  const start = await pieceOf(studio, ref, number);
  if (start.stage === 'waiting' && start.route.includes('pattern')) await toMould(studio, ref);
  for (let piece = await pieceOf(studio, ref, number); piece.stage !== to; piece = await pieceOf(studio, ref, number)) {
    const next = nextStage(piece.route, piece.stage);
    if (!next) throw new Error(`piece ${number} of ${ref} never reaches ${to}`);
    const massG = piece.targetMassG ?? 100;
    if (next === 'inspected') await photograph(studio, ref, 'inspected', { piece: number });
    must(await press(studio, ref, next, { piece: number, ...(next === 'inspected' ? { massG } : {}) }));
  }
}

export async function scrap(
  studio: PayingStudio,
  ref: string,
  more: Partial<{ piece: number; from: PieceStage; cause: string; note: string; photo: string; clientId: string }> = {},
) {
  const piece = more.piece ?? 1;
  const from = more.from ?? (await pieceOf(studio, ref, piece)).stage;
  const input = scrapSchema.parse({ clientId: entryId(), piece, from, cause: 'misrun', ...more });
  return scrapCasting(studio.services, studio.maker, ref, input);
}

/** Every piece inspected, the customer told, the balance paid and the parcel packed. */
export async function toPacked(studio: PayingStudio, ref: string): Promise<void> {
  const { pieces } = await commission(studio, ref);
  for (let number = 1; number <= pieces; number += 1) await bring(studio, ref, 'inspected', number);
  must(await finishCommission(studio.services, studio.maker, ref));
  await payDue(studio, ref);
  for (let number = 1; number <= pieces; number += 1) must(await press(studio, ref, 'packed', { piece: number }));
}

export const PARCEL = { carrier: 'Estuary Parcels', tracking: 'EP 100 200', parcel: 'A flat wooden box' };

export function dispatch(studio: PayingStudio, ref: string, more: Record<string, unknown> = {}, by = studio.owner) {
  const input = dispatchSchema.parse({ ...PARCEL, adultSignature: 'yes', ...more });
  return dispatchCommission(studio.services, by, ref, input);
}

export async function attemptsOf(studio: PayingStudio, ref: string) {
  return readAttempts(studio.services.db, (await commission(studio, ref)).id);
}

/** Mails of one letter queued for a commission, oldest first. */
export async function mailsOf(studio: PayingStudio, ref: string, letter: string) {
  const { id } = await commission(studio, ref);
  const rows = await studio.services.db.select().from(mails).where(eq(mails.commissionId, id)).orderBy(mails.id);
  return rows.filter((row) => row.letter === letter);
}
