import { asc, desc, eq } from 'drizzle-orm';
import { runnerOf, type RunnerStep } from '../../commission/making/customer-runner';
import { SCRAP_CAUSES, STAGE_OPERATIONS, type PieceStage, type ScrapCause } from '../../commission/making/making';
import type { CommissionRow } from '../commissions';
import type { Db } from '../db/client';
import { events } from '../db/schema/commissions';
import { photos } from '../db/schema/making';
import { ledgerEntries } from '../db/schema/quotes';
import { users } from '../db/schema/people';
import { latestGate } from '../making/gates';
import { readAttempts, readPieces } from '../making/pieces';

/** A photo as the customer sees it; sizes in pixels. */
export interface ShownPhoto {
  id: string;
  caption: string;
  alt: string;
  width: number;
  height: number;
}

/** Something that happened at the bench, with its photos, the newest first. `by` is a first name. */
export interface BenchNews {
  key: string;
  title: string;
  text: string | null;
  at: Date;
  by: string | null;
  photos: ShownPhoto[];
}

/** The open or decided gate on the pattern. */
export interface ShownGate {
  state: 'open' | 'approved' | 'changes';
  photoSet: string;
  openedAt: Date;
  note: string | null;
  photos: ShownPhoto[];
}

/** A receipt to open. */
export interface ShownReceipt {
  receiptNo: number;
  amountMinor: number;
  currency: string;
  at: Date;
}

/** What was made so far, for the customer's page. */
export interface CustomerMaking {
  runner: RunnerStep[];
  news: BenchNews[];
  gate: ShownGate | null;
  measured: { piece: number; massG: number; balanceMm?: number }[];
  receipts: ShownReceipt[];
  dispatch: CommissionRow['dispatch'];
}

/** Reads the runner, the news with photos, the gate and the receipts of one commission. The caller has checked who asks. */
export async function readCustomerMaking(
  db: Db,
  row: CommissionRow,
  dayWords: (day: string) => string,
): Promise<CustomerMaking> {
  const pieces = await readPieces(db, row.id);
  const attempts = await readAttempts(db, row.id);
  const shown = await readShown(db, row.id);
  const lines = await db.select().from(events).where(eq(events.commissionId, row.id)).orderBy(asc(events.id));
  const entries = await db
    .select()
    .from(ledgerEntries)
    .where(eq(ledgerEntries.commissionId, row.id))
    .orderBy(desc(ledgerEntries.at));
  const gate = await gateOf(db, row.id, shown);
  const waiting = new Set(gate?.state === 'open' ? gate.photos.map((photo) => photo.id) : []);
  return {
    runner: runnerOf({
      gateA: gate?.state ?? 'none',
      deal: row.deal,
      pieces,
      reachedOn: daysReached(lines),
      scrapped: attempts.filter((each) => each.result === 'scrapped').length,
      dayWords,
    }),
    news: newsOf(
      shown.filter(({ photo }) => !waiting.has(photo.id)),
      lines,
    ),
    gate,
    measured: pieces.flatMap(({ number, measured }) =>
      measured?.massG
        ? [
            {
              piece: number,
              massG: measured.massG,
              ...(measured.balanceMm === undefined ? {} : { balanceMm: measured.balanceMm }),
            },
          ]
        : [],
    ),
    receipts: entries.flatMap(({ receiptNo, amountMinor, currency, at }) =>
      receiptNo === null ? [] : [{ receiptNo, amountMinor, currency, at }],
    ),
    dispatch: row.dispatch,
  };
}

type EventRow = typeof events.$inferSelect;
type Shown = Awaited<ReturnType<typeof readShown>>;

function readShown(db: Db, commissionId: string) {
  return db
    .select({ photo: photos, by: users.givenName })
    .from(photos)
    .leftJoin(users, eq(users.id, photos.by))
    .where(eq(photos.commissionId, commissionId))
    .orderBy(desc(photos.takenAt), desc(photos.id))
    .then((rows) => rows.filter(({ photo }) => photo.shared));
}

function daysReached(lines: readonly EventRow[]): Partial<Record<PieceStage | 'sent' | 'approved', string>> {
  const days: Partial<Record<PieceStage | 'sent' | 'approved', string>> = {};
  for (const { code, at } of lines) {
    const day = at.toISOString().slice(0, 10);
    if (code.startsWith('stage-')) days[code.slice(6) as PieceStage] = day;
    if (code === 'T16') days.approved = day;
    if (code === 'T32') days.sent = day;
  }
  return days;
}

function shownPhoto({ photo }: Shown[number]): ShownPhoto {
  const { width, height } = photo.files.medium;
  return { id: photo.id, caption: photo.caption, alt: photo.alt, width, height };
}

/** Photos are told together when they belong to one stage and one day; a scrapped casting is news of its own. */
function newsOf(shown: Shown, lines: readonly EventRow[]): BenchNews[] {
  const scraps = lines.filter((line) => line.code === 'T23').map((line) => scrapNews(line, shown));
  const told = new Set(scraps.flatMap((news) => news.photos.map((photo) => photo.id)));
  const groups = new Map<string, Shown>();
  for (const each of shown.filter(({ photo }) => !told.has(photo.id))) {
    const key = `${each.photo.stage}:${each.photo.takenAt.toISOString().slice(0, 10)}`;
    groups.set(key, [...(groups.get(key) ?? []), each]);
  }
  const photoNews = [...groups].map(([key, list]) => ({
    key,
    title: titleOf(list[0]!.photo.stage as PieceStage),
    text: null,
    at: list[0]!.photo.takenAt,
    by: list[0]!.by,
    photos: list.map(shownPhoto),
  }));
  return [...photoNews, ...scraps].sort((a, b) => b.at.getTime() - a.at.getTime());
}

/** What the photos of a stage show: the work towards it, since they are taken before it is reached. */
function titleOf(stage: PieceStage): string {
  const titles: Partial<Record<PieceStage, string>> = {
    waiting: 'At the bench',
    pattern: 'The pattern',
    mould: 'The mould',
    poured: 'At the pour',
    sound: 'Out of the mould',
    inspected: 'The finished piece',
  };
  return titles[stage] ?? STAGE_OPERATIONS[stage];
}

function scrapNews(line: EventRow, shown: Shown): BenchNews {
  const data = line.data as { cause?: ScrapCause; photo?: string; attempt?: number };
  const cause = data.cause ? SCRAP_CAUSES[data.cause] : null;
  return {
    key: `scrap:${line.id}`,
    title: cause ? `A pour failed: ${cause.name.toLowerCase()}` : 'A pour failed',
    text: `${cause?.plain ?? ''} It is poured again. Nothing changes in your price.`.trim(),
    at: line.at,
    by: null,
    photos: shown.filter(({ photo }) => photo.id === data.photo).map(shownPhoto),
  };
}

async function gateOf(db: Db, commissionId: string, shown: Shown): Promise<ShownGate | null> {
  const gate = await latestGate(db, commissionId, 'A');
  if (!gate) return null;
  return {
    state: gate.state as ShownGate['state'],
    photoSet: gate.photoSetSha256,
    openedAt: gate.openedAt,
    note: gate.note,
    photos: gate.photoIds.flatMap((id) => shown.filter(({ photo }) => photo.id === id).map(shownPhoto)),
  };
}
