import { and, eq, inArray } from 'drizzle-orm';
import { countryName } from '../../commission/countries';
import { quoteDraftSchema, type QuoteDraft } from '../../commission/pricing/quote-draft';
import { withPieces } from '../../commission/sentence';
import type { CommissionRow } from '../commissions';
import type { Db, Transaction } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { quotes } from '../db/schema/quotes';
import { leavesBetween } from './promised-days';

/** The accepted quote's draft, as frozen; null before acceptance. */
export async function acceptedDraft(db: Db, commissionId: string): Promise<QuoteDraft | null> {
  return (await acceptedDrafts(db, [commissionId])).get(commissionId) ?? null;
}

/** The same for many commissions in one query, by id; those without an accepted quote are left out. */
export async function acceptedDrafts(db: Db, commissionIds: readonly string[]): Promise<Map<string, QuoteDraft>> {
  const rows = await db
    .select({ id: quotes.commissionId, body: quotes.body })
    .from(quotes)
    .where(and(inArray(quotes.commissionId, [...commissionIds]), eq(quotes.state, 'accepted')));
  return new Map(rows.map(({ id, body }) => [id, quoteDraftSchema.parse((body as { draft: unknown }).draft)]));
}

/** The accepted quote's weeks, counted from the first payment, become the days between which the piece leaves (T12). */
export async function writePromise(tx: Transaction, commission: CommissionRow, from: Date): Promise<CommissionRow> {
  const draft = await acceptedDraft(tx, commission.id);
  if (!draft) return commission;
  const leaves = leavesBetween(from, draft.dateRange);
  const promise = { leavesFrom: leaves.from, leavesTo: leaves.to };
  await tx.update(commissions).set(promise).where(eq(commissions.id, commission.id));
  return { ...commission, ...promise };
}

/** The facts a customer confirms before work starts: what it is, alloy, mass, finish, and where it goes. */
export async function pieceFacts(db: Db, commission: CommissionRow): Promise<{ label: string; value: string }[]> {
  const draft = await acceptedDraft(db, commission.id);
  const facts = [
    { label: 'Piece', value: withPieces(commission.title, commission.pieces) },
    { label: 'Metal', value: draft?.metal.name ?? commission.alloy },
  ];
  if (draft) {
    const tolerance = Math.round(draft.massesG.finished * draft.massTolerance);
    facts.push({
      label: 'Finished mass',
      value: `${draft.massesG.finished} g ± ${tolerance} g${commission.pieces > 1 ? ' each' : ''}`,
    });
    for (const [index, sentence] of draft.specification.slice(0, 6).entries()) {
      facts.push({ label: index === 0 ? 'Made like this' : 'And', value: sentence });
    }
  }
  const address = commission.shipping?.lines.join(', ');
  facts.push({
    label: 'Goes to',
    value: [address, countryName(commission.shipping?.country ?? commission.destination)].filter(Boolean).join(', '),
  });
  return facts;
}
