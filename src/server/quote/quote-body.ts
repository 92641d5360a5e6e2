import { createHash } from 'node:crypto';
import { canonicalJson } from '../../commission/canonical-json';
import type { PricedQuote } from '../../commission/pricing/pricing-results';
import type { QuoteDraft } from '../../commission/pricing/quote-draft';
import { termsText, type Terms } from '../../commission/terms';
import type { CommissionRow } from '../commissions';
import type { quotes } from '../db/schema/quotes';
import type { QuotingStudio } from '../studio';

export type QuoteRow = typeof quotes.$inferSelect;

/** What a sent revision freezes: everything it was priced from, the prices, both sides, and the terms' fingerprint. */
export interface QuoteBody {
  draft: QuoteDraft;
  priced: PricedQuote;
  customer: { name: string; email: string; buyer: 'consumer' | 'institution'; country: string };
  terms: { version: string; sha256: string };
  studio: QuotingStudio;
}

/** SHA-256 (hex) over UTF-8 text. */
export function sha256(text: string): string {
  return createHash('sha256').update(text, 'utf8').digest('hex');
}

/** Fingerprint of one version of the terms. */
export function termsSha256(terms: Terms): string {
  return sha256(termsText(terms));
}

/** Fingerprint of a quote's body: SHA-256 over its canonical JSON. */
export function bodySha256(body: unknown): string {
  return sha256(canonicalJson(body));
}

/** Puts together what will be frozen. */
export function quoteBody(
  commission: CommissionRow,
  draft: QuoteDraft,
  priced: PricedQuote,
  terms: Terms,
  studio: QuotingStudio,
): QuoteBody {
  return {
    draft,
    priced,
    customer: {
      name: commission.customerName,
      email: commission.email,
      buyer: commission.buyer?.kind ?? 'consumer',
      country: commission.destination,
    },
    terms: { version: terms.version, sha256: termsSha256(terms) },
    studio,
  };
}

/** The frozen body of a sent revision. */
export function bodyOf(quote: Pick<QuoteRow, 'body'>): QuoteBody {
  return quote.body as QuoteBody;
}

/** True when the body still has the fingerprint it was sent with. */
export function isIntact(quote: Pick<QuoteRow, 'body' | 'sha256'>): boolean {
  return bodySha256(quote.body) === quote.sha256;
}
