import { and, eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import type { SendQuote, Withdraw } from '../../commission/pricing/desk';
import type { DealMove } from '../../commission/deal';
import { formatMoney } from '../../commission/money';
import type { Actor } from '../../commission/permissions';
import type { PricedQuote } from '../../commission/pricing/pricing-results';
import { done, refuse, type Outcome } from '../../commission/problem';
import { priceQuote } from '../../commission/pricing/quote';
import type { QuoteDraft } from '../../commission/pricing/quote-draft';
import type { Terms } from '../../commission/terms';
import { findCommission, lockCommission, type CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { checkoutSessions, quotes } from '../db/schema/quotes';
import { moveDeal, recordEvent } from '../history';
import { bodySha256, quoteBody, type QuoteRow } from './quote-body';
import { checkQuote } from './quote-checks';
import { lastRevision, readDraft } from './quote-desk';
import { queueQuoteMail } from './quote-mails';
import { readQuotes } from './quote-view';
import { currentRates } from '../pricing/rates';
import { readRights } from '../enquiry/rights';
import type { Services } from '../services';
import { readStudio } from '../studio';

const DAY_MS = 24 * 60 * 60_000;

/** A revision as it was sent. */
export interface SentQuote {
  revision: number;
  sha256: string;
}

/**
 * Freezes the saved draft as a quote revision and sends it (T7; T8 over an earlier one, which is withdrawn in the same
 * transaction; T10 after a lapse). The press names the draft's version and the revision it means, so that a second
 * press answers as the first did and never makes another revision.
 */
export async function sendQuote(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: SendQuote,
): Promise<Outcome<SentQuote>> {
  const found = await findCommission(services, actor, ref, 'quote:write');
  if (!found.ok) return found;
  const rates = await currentRates(services.db);
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    const saved = await readDraft(tx, commission.id);
    if (!saved) return refuse('conflict', 'Save the draft first: what is sent is what was saved.');
    if (saved.version !== input.version)
      return refuse(
        'stale',
        'The draft was saved again since this page was opened. Look at it once more before you send it.',
      );
    const earlier = await readQuotes(tx, commission.id);
    const named = earlier.find((quote) => quote.revision === input.revision);
    if (named) return repeated(named);
    if (input.revision !== (await lastRevision(tx, commission.id)) + 1)
      return refuse('stale', 'Another revision was sent since this page was opened. Reload it to see which.');
    const priced = priceQuote(saved.draft);
    const terms = checkQuote(commission, saved.draft, priced, await readRights(tx, commission), rates);
    if (!terms.ok) return terms;
    return freeze(services, tx, { commission, actor, draft: saved.draft, priced, terms: terms.value, earlier });
  });
}

function repeated(quote: QuoteRow): Outcome<SentQuote> {
  if (quote.state === 'sent') return done({ revision: quote.revision, sha256: quote.sha256 });
  return refuse(
    'conflict',
    `Revision ${quote.revision} exists and is ${quote.state}. Reload the page to send the next.`,
  );
}

interface Freezing {
  commission: CommissionRow;
  actor: Actor;
  draft: QuoteDraft;
  priced: PricedQuote;
  terms: Terms;
  earlier: QuoteRow[];
}

async function freeze(services: Services, tx: Transaction, freezing: Freezing): Promise<Outcome<SentQuote>> {
  const { commission, actor, draft, priced, terms, earlier } = freezing;
  const at = services.now();
  const body = quoteBody(commission, draft, priced, terms, await readStudio(tx));
  const revision = (earlier.at(-1)?.revision ?? 0) + 1;
  const hash = bodySha256(body);
  const moved = await moveDeal(tx, commission, {
    move: moveFor(commission),
    mover: 'owner',
    actor,
    sentence: `Quote revision ${revision} was sent: ${formatMoney(priced.totals.grossMinor, priced.quoted)} in all.`,
    public: true,
    at,
    data: { revision, sha256: hash, termsVersion: terms.version, termsSha256: body.terms.sha256 },
  });
  if (!moved.ok) return moved;
  for (const quote of earlier.filter((each) => each.state === 'sent')) await closeQuote(tx, quote, at);
  const [row] = await tx
    .insert(quotes)
    .values({
      id: uuidv7(),
      commissionId: commission.id,
      revision,
      state: 'sent',
      body,
      sha256: hash,
      termsVersion: terms.version,
      validUntil: new Date(at.getTime() + draft.validityDays * DAY_MS),
      sentAt: at,
      sentBy: actor!.id,
    })
    .returning();
  await queueQuoteMail(tx, commission, row!, earlier.at(-1) ?? null);
  return done({ revision, sha256: hash });
}

function moveFor({ deal }: CommissionRow): DealMove {
  if (deal === 'quoted') return 'T8';
  return deal === 'lapsed' ? 'T10' : 'T7';
}

/** Withdraws a revision; a payment page that is open for it ends with it. */
async function closeQuote(tx: Transaction, quote: QuoteRow, at: Date): Promise<void> {
  await tx
    .update(quotes)
    .set({ state: 'withdrawn', withdrawnAt: at, closedAt: at })
    .where(and(eq(quotes.id, quote.id), eq(quotes.state, 'sent')));
  await tx
    .update(checkoutSessions)
    .set({ state: 'expired' })
    .where(and(eq(checkoutSessions.quoteId, quote.id), eq(checkoutSessions.state, 'open')));
}

/** Takes back a revision that is out, without a new one. It can be neither accepted nor paid from then on. */
export async function withdrawQuote(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  revision: number,
  input: Withdraw,
): Promise<Outcome<{ revision: number }>> {
  const found = await findCommission(services, actor, ref, 'quote:write');
  if (!found.ok) return found;
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    const quote = (await readQuotes(tx, commission.id)).find((each) => each.revision === revision);
    if (!quote) return refuse('not-found', `There is no revision ${revision} of this quote.`);
    if (quote.state === 'withdrawn') return done({ revision });
    if (quote.state !== 'sent')
      return refuse('conflict', `Revision ${revision} is ${quote.state} and can no longer be withdrawn.`);
    const at = services.now();
    await closeQuote(tx, quote, at);
    await recordEvent(tx, {
      commissionId: commission.id,
      code: 'quote-withdrawn',
      actor,
      sentence: `Quote revision ${revision} was withdrawn.`,
      public: true,
      at,
      data: { revision, sha256: quote.sha256, reason: input.reason ?? null },
    });
    return done({ revision });
  });
}
