import { and, asc, desc, eq } from 'drizzle-orm';
import { STAGE_WHEN, type CustomerQuote } from '../../commission/quote-view';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { findCommission } from '../commissions';
import type { Db } from '../db/client';
import { quotes } from '../db/schema/quotes';
import { bodyOf, type QuoteRow } from './quote-body';
import type { Services } from '../services';

/** A revision as its customer may read it: named fields only, so that nothing the studio reckons with slips through. */
export function customerView(quote: QuoteRow, now: Date): CustomerQuote {
  const { draft, priced, customer, terms, studio } = bodyOf(quote);
  const { kind, rate, shown } = draft.tax;
  return {
    revision: quote.revision,
    state: quote.state,
    open: quote.state === 'sent' && quote.validUntil > now,
    sentAt: quote.sentAt,
    validUntil: quote.validUntil,
    sha256: quote.sha256,
    title: draft.title,
    pieces: draft.pieces,
    specification: draft.specification,
    metal: draft.metal.name,
    mass: { grams: draft.massesG.finished, toleranceG: Math.round(draft.massesG.finished * draft.massTolerance) },
    currency: priced.quoted,
    lines: priced.documentLines.map(({ id, label, netMinor, taxMinor, grossMinor }) => ({
      id,
      label,
      netMinor,
      taxMinor,
      grossMinor,
    })),
    totals: {
      netMinor: priced.totals.netMinor,
      taxMinor: priced.totals.taxMinor,
      grossMinor: priced.totals.grossMinor,
    },
    tax: { kind, rate, shown },
    stages: priced.stages.map(({ id, label, netMinor, taxMinor, grossMinor }) => ({
      id,
      label,
      netMinor,
      taxMinor,
      grossMinor,
      when: STAGE_WHEN[id],
    })),
    includedRounds: draft.includedRounds,
    weeks: { earliestWeeks: draft.dateRange.earliestWeeks, latestWeeks: draft.dateRange.latestWeeks },
    mark: draft.mark,
    outOfRangeReason: draft.outOfRangeReason,
    terms: { version: terms.version, sha256: terms.sha256 },
    customer: { name: customer.name, country: customer.country },
    studio: {
      name: studio.name,
      place: studio.place,
      ...(studio.vatNumber ? { vatNumber: studio.vatNumber } : {}),
    },
  };
}

/** Every revision ever sent for a commission, the oldest first. */
export function readQuotes(db: Db, commissionId: string): Promise<QuoteRow[]> {
  return db.select().from(quotes).where(eq(quotes.commissionId, commissionId)).orderBy(asc(quotes.revision));
}

/** The revision in force: sent or accepted; null when there is none. */
export async function liveQuote(db: Db, commissionId: string): Promise<QuoteRow | null> {
  const rows = await db
    .select()
    .from(quotes)
    .where(eq(quotes.commissionId, commissionId))
    .orderBy(desc(quotes.revision));
  return rows.find((row) => row.state === 'sent' || row.state === 'accepted') ?? null;
}

/** One revision for whoever may read it: the customer, an owner, the bookkeeper. */
export async function readCustomerQuote(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  revision: number,
): Promise<Outcome<CustomerQuote>> {
  const found = await findCommission(services, actor, ref, 'quote:read');
  if (!found.ok) return found;
  const [row] = await services.db
    .select()
    .from(quotes)
    .where(and(eq(quotes.commissionId, found.value.id), eq(quotes.revision, revision)));
  return row
    ? done(customerView(row, services.now()))
    : refuse(
        'not-found',
        `There is no revision ${revision} of this quote. The commission’s page shows the ones there are.`,
      );
}
