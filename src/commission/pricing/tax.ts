import { share } from '../money';
import type { DocumentLine } from './pricing-results';
import type { TaxTreatment } from './quote-draft';

/** The rate that falls on the quote's lines: none on an export. */
export function taxRate(tax: Pick<TaxTreatment, 'kind' | 'rate'>): number {
  return tax.kind === 'export' ? 0 : tax.rate;
}

/** One line of a document with its tax, half-up on the line's rounded net amount. */
export function taxedLine(id: DocumentLine['id'], label: string, netMinor: number, rate: number): DocumentLine {
  const taxMinor = share(netMinor, rate);
  return { id, label, netMinor, taxMinor, grossMinor: netMinor + taxMinor };
}

/** Sums of document lines: net, tax and gross. */
export function sumDocument(lines: readonly Pick<DocumentLine, 'netMinor' | 'taxMinor' | 'grossMinor'>[]) {
  return {
    netMinor: lines.reduce((sum, line) => sum + line.netMinor, 0),
    taxMinor: lines.reduce((sum, line) => sum + line.taxMinor, 0),
    grossMinor: lines.reduce((sum, line) => sum + line.grossMinor, 0),
  };
}
