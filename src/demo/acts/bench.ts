import { nextStage, STAGE_OPERATIONS, type PieceStage, type ScrapCause } from '../../commission/making/making';
import type { QuoteDraft } from '../../commission/pricing/quote-draft';
import { decideGate, latestGate } from '../../server/making/gates';
import { reachStage } from '../../server/making/making';
import { logMinutes } from '../../server/making/minutes';
import { storePhoto } from '../../server/making/photos';
import { readPieces } from '../../server/making/pieces';
import { acceptedDraft } from '../../server/quote/promise';
import { scrapCasting } from '../../server/making/scrap';
import { commissionOf, must, type World } from '../world';

const MOST_AT_ONCE = 720;

/** Minutes somebody logs; a long day’s work is entered in parts, as the bench page asks. */
export async function work(
  world: World,
  ref: string,
  who: string,
  operation: string,
  minutes: number,
  piece?: number,
): Promise<void> {
  for (let left = Math.round(minutes); left > 0; left -= MOST_AT_ONCE) {
    const entry = { clientId: world.newId(`${ref}-minutes`), operation, minutes: Math.min(left, MOST_AT_ONCE) };
    const input = piece === undefined ? entry : { ...entry, piece };
    must(await logMinutes(world.services, world.person(who), ref, input), `${ref} ${operation}`);
  }
}

/** A photo from the bench: the picture of that name, told in a caption and in words for those who do not see it. */
export interface Shot {
  picture: string;
  stage: PieceStage;
  caption: string;
  alt: string;
  piece?: number;
}

/** Puts a photo on the commission; its id. */
export async function photo(world: World, ref: string, who: string, shot: Shot): Promise<string> {
  const { services } = world;
  const { id } = await commissionOf(world, ref);
  const { picture, stage, caption, alt, piece } = shot;
  const fields = {
    clientId: world.newId(`${ref}-photo`),
    stage,
    caption,
    alt,
    ...(piece === undefined ? {} : { piece }),
  };
  const stored = { fields, ...world.picture(picture) };
  return must(await storePhoto(services, world.person(who), id, stored), `${ref} photo ${picture}`).id;
}

/** What a step at the bench may carry: which pieces, masses in g by piece, heat and mould numbers. */
export interface StepFacts {
  pieces?: number[];
  massG?: number | ((piece: number) => number);
  balanceMm?: number;
  heatNo?: string;
  note?: string;
  edge?: string;
  /** Actual hours against the quoted ones. */
  ratio?: number;
}

/** Every piece (or those named) whose next stage this is reaches it; the minutes it took are logged before. */
export async function reach(
  world: World,
  ref: string,
  who: string,
  to: PieceStage,
  facts: StepFacts = {},
): Promise<void> {
  const { services } = world;
  const { id } = await commissionOf(world, ref);
  const draft = await acceptedDraft(services.db, id);
  const { pieces, massG, ratio = 1, ...rest } = facts;
  for (const piece of await readPieces(services.db, id)) {
    const concerned = pieces?.includes(piece.number) ?? true;
    if (!concerned || nextStage(piece.route, piece.stage) !== to) continue;
    const minutes = draft ? minutesFor(draft, to) * ratio : 0;
    await work(world, ref, who, STAGE_OPERATIONS[to], minutes, piece.number);
    const input = {
      clientId: world.newId(`${ref}-stage`),
      piece: piece.number,
      from: piece.stage,
      to,
      ...rest,
      ...(massG === undefined ? {} : { massG: typeof massG === 'number' ? massG : massG(piece.number) }),
    };
    must(await reachStage(services, world.person(who), ref, input), `${ref} ${to}`);
  }
}

/** Lines of a quote whose minutes belong to a stage, by the start of their id. Pattern minutes are told one by one. */
const LINES_OF: Partial<Record<PieceStage, string[]>> = {
  mould: ['wax', 'shell', 'mould', 'core'],
  sound: ['break-out'],
  fettled: ['fettle'],
  hardened: ['edge'],
  finished: ['chase', 'finish'],
  hafted: ['haft'],
  inspected: ['inspect'],
};

function minutesFor(draft: QuoteDraft, stage: PieceStage): number {
  const starts = LINES_OF[stage] ?? [];
  return draft.lines
    .filter((line) => starts.some((start) => line.id.startsWith(start)))
    .reduce((sum, line) => sum + line.minutes, 0);
}

/** A casting is given up; the photo is the one of that id. */
export async function scrap(
  world: World,
  ref: string,
  who: string,
  fault: { piece: number; from: PieceStage; cause: ScrapCause; note: string; photo?: string },
): Promise<void> {
  const input = { clientId: world.newId(`${ref}-scrap`), ...fault };
  must(await scrapCasting(world.services, world.person(who), ref, input), `${ref} scrap`);
}

/** The customer approves the pictures at gate A. */
export async function approveGate(world: World, ref: string, customer: string): Promise<void> {
  const { services } = world;
  const { id } = await commissionOf(world, ref);
  const gate = await latestGate(services.db, id, 'A');
  if (!gate) throw new Error(`The demo’s ${ref} has no gate open.`);
  const input = { photoSet: gate.photoSetSha256, decision: 'approve' as const };
  must(await decideGate(services, world.person(customer), ref, input), `${ref} gate A`);
}

/** The one-off hours before gate A, line by line as quoted: the desk’s by Wren, the bench’s by `maker`. */
export async function workBeforeGate(world: World, ref: string, maker: string): Promise<void> {
  const { id } = await commissionOf(world, ref);
  const draft = await acceptedDraft(world.services.db, id);
  if (!draft) throw new Error(`The demo’s ${ref} was never accepted.`);
  const desk = Math.max(...draft.lines.map((line) => line.rateMinorPerHour));
  for (const line of draft.lines.filter(({ group }) => group === 'before-gate')) {
    await work(world, ref, line.rateMinorPerHour === desk ? 'wren' : maker, line.label, line.minutes);
  }
}
