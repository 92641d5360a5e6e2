import { desc, eq } from 'drizzle-orm';
import { canonicalJson } from '../../commission/canonical-json';
import type { DealState } from '../../commission/deal';
import { deskChoices, unknownChoices, type DeskChoices } from '../../commission/pricing/desk-choices';
import { applyDesk } from '../../commission/pricing/desk-fields';
import type { Desk } from '../../commission/pricing/desk';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { quoteDraftSchema, type QuoteDraft } from '../../commission/pricing/quote-draft';
import { findCommission, lockCommission, type CommissionRow } from '../commissions';
import type { Db, Transaction } from '../db/client';
import { quoteDrafts, quotes } from '../db/schema/quotes';
import { currentRates } from '../pricing/rates';
import { freshDraft, repricedDraft } from './fresh-draft';
import type { Services } from '../services';

/** The desk as its page opens it. `version` 0: nothing was saved yet, the draft comes from the estimate. */
export interface QuoteDesk {
  commission: CommissionRow;
  draft: QuoteDraft;
  version: number;
  /** What may be chosen at the desk, at today's rates. */
  choices: DeskChoices;
  /** The revision that would be sent next. */
  revision: number;
  /** Price, metal or queue were reckoned with rates that have changed since. */
  ratesChanged: boolean;
}

/** Opens the owner's working copy of the next revision; the first time it is drawn from the customer's own estimate. */
export async function openDesk(services: Services, actor: Actor, ref: string | undefined): Promise<Outcome<QuoteDesk>> {
  const found = await findCommission(services, actor, ref, 'quote:write');
  if (!found.ok) return found;
  const commission = found.value;
  const fresh = await freshDraft(services, commission);
  if (!fresh.ok) return fresh;
  const saved = await readDraft(services.db, commission.id);
  const draft = saved?.draft ?? fresh.value;
  return done({
    commission,
    draft,
    version: saved?.version ?? 0,
    choices: deskChoices(await currentRates(services.db)),
    revision: (await lastRevision(services.db, commission.id)) + 1,
    ratesChanged: draft.ratesVersion !== fresh.value.ratesVersion,
  });
}

/**
 * Saves what was typed at the desk. It names the version it was typed over: when another window saved meanwhile, nothing
 * is overwritten and the answer is `stale`. The same figures saved twice are saved once.
 */
export async function saveDraft(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: Desk,
): Promise<Outcome<{ version: number; revision: number }>> {
  const found = await findCommission(services, actor, ref, 'quote:write');
  if (!found.ok) return found;
  const fresh = await freshDraft(services, found.value);
  if (!fresh.ok) return fresh;
  const choices = deskChoices(await currentRates(services.db));
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    const open = stillOpen(commission);
    if (!open.ok) return open;
    const saved = await readDraft(tx, commission.id);
    const draft = saved?.draft ?? fresh.value;
    const unknown = unknownChoices(draft, input, choices);
    const [wrong] = Object.values(unknown);
    if (wrong) return refuse('invalid', wrong, unknown);
    const parsed = quoteDraftSchema.safeParse(applyDesk(draft, input, choices));
    if (!parsed.success) return refuse('invalid', parsed.error.issues[0]?.message ?? 'The draft cannot be kept so.');
    return keepDraft(services, tx, commission, saved, parsed.data, input.version);
  });
}

/** Takes today's rates, metal and queue into the draft; hours and words the owner typed stay. */
export async function repriceDraft(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: { version: number },
): Promise<Outcome<{ version: number; revision: number }>> {
  const found = await findCommission(services, actor, ref, 'quote:write');
  if (!found.ok) return found;
  const fresh = await freshDraft(services, found.value);
  if (!fresh.ok) return fresh;
  const choices = deskChoices(await currentRates(services.db));
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    const open = stillOpen(commission);
    if (!open.ok) return open;
    const saved = await readDraft(tx, commission.id);
    const draft = saved ? repricedDraft(saved.draft, fresh.value, choices) : fresh.value;
    return keepDraft(services, tx, commission, saved, draft, input.version);
  });
}

type Saved = { draft: QuoteDraft; version: number } | null;

async function keepDraft(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  saved: Saved,
  draft: QuoteDraft,
  readVersion: number,
): Promise<Outcome<{ version: number; revision: number }>> {
  const version = saved?.version ?? 0;
  const revision = (await lastRevision(tx, commission.id)) + 1;
  if (saved && canonicalJson(saved.draft) === canonicalJson(draft)) return done({ version, revision });
  if (version !== readVersion)
    return refuse(
      'stale',
      'The draft was saved from another window since this one was opened. Nothing was overwritten: compare below, and save again to keep what you typed.',
    );
  const updatedAt = services.now();
  await tx
    .insert(quoteDrafts)
    .values({ commissionId: commission.id, draft, version: version + 1, updatedAt })
    .onConflictDoUpdate({ target: quoteDrafts.commissionId, set: { draft, version: version + 1, updatedAt } });
  return done({ version: version + 1, revision });
}

/** True while a commission's draft may change: until a quote is accepted or the enquiry declined. */
export function mayStillQuote(deal: DealState): boolean {
  return ['enquiry', 'asking', 'estimated', 'quoted', 'lapsed'].includes(deal);
}

function stillOpen(commission: CommissionRow): Outcome<null> {
  if (mayStillQuote(commission.deal)) return done(null);
  return refuse(
    'conflict',
    'This commission is past quoting, so its draft no longer changes. The accepted quote stands as it was frozen.',
  );
}

/** The saved draft of a commission and its version; null before the first save. */
export async function readDraft(db: Db, commissionId: string): Promise<Saved> {
  const [row] = await db.select().from(quoteDrafts).where(eq(quoteDrafts.commissionId, commissionId));
  return row ? { draft: quoteDraftSchema.parse(row.draft), version: row.version } : null;
}

/** The number of the newest revision that was ever sent; 0 when none was. */
export async function lastRevision(db: Db, commissionId: string): Promise<number> {
  const [row] = await db
    .select({ revision: quotes.revision })
    .from(quotes)
    .where(eq(quotes.commissionId, commissionId))
    .orderBy(desc(quotes.revision))
    .limit(1);
  return row?.revision ?? 0;
}
