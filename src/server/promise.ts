import { and, eq } from 'drizzle-orm';
import { quoteDraftSchema } from '../commission/quote-draft';
import type { CommissionRow } from './commissions';
import type { Db } from './db/client';
import { quotes } from './db/schema/quotes';

/** The accepted quote's draft, as frozen; null before acceptance. */
export async function acceptedDraft(db: Db, commissionId: string) {
  const [row] = await db
    .select({ body: quotes.body })
    .from(quotes)
    .where(and(eq(quotes.commissionId, commissionId), eq(quotes.state, 'accepted')));
  return row ? quoteDraftSchema.parse((row.body as { draft: unknown }).draft) : null;
}

/** The facts a customer confirms before work starts: what it is, alloy, mass, finish, and where it goes. */
export async function pieceFacts(db: Db, commission: CommissionRow): Promise<{ label: string; value: string }[]> {
  const draft = await acceptedDraft(db, commission.id);
  const facts = [
    { label: 'Piece', value: `${commission.title}${commission.pieces > 1 ? `, ${commission.pieces} of them` : ''}` },
    { label: 'Metal', value: draft?.metal.name ?? commission.alloy },
  ];
  if (draft) {
    const tolerance = Math.round(draft.massesG.finished * draft.massTolerance);
    facts.push({ label: 'Finished mass', value: `${draft.massesG.finished} g ± ${tolerance} g each` });
    for (const [index, sentence] of draft.specification.slice(0, 6).entries()) {
      facts.push({ label: index === 0 ? 'Made like this' : 'And', value: sentence });
    }
  }
  const address = commission.shipping?.lines.join(', ');
  facts.push({
    label: 'Goes to',
    value: address ? `${address}, ${commission.shipping!.country}` : commission.destination,
  });
  return facts;
}
