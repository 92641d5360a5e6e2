import { formatMoney } from '../../commission/money';
import { diffQuotes } from '../../commission/pricing/quote-diff';
import type { CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { queueMail } from '../outbox';
import { leavesBetween } from './promised-days';
import { bodyOf, type QuoteRow } from './quote-body';
import { customerView } from './quote-view';

/** What M7, M8 and M11 say of a quote, from the customer's own view of it. */
export function quoteFacts(commission: CommissionRow, quote: QuoteRow) {
  const view = customerView(quote, quote.sentAt);
  const money = (minor: number) => ({ minor, currency: view.currency });
  return {
    ref: commission.ref,
    title: view.title,
    name: commission.customerName,
    revision: view.revision,
    total: money(view.totals.grossMinor),
    termsVersion: view.terms.version,
    stages: view.stages.map((stage) => ({ label: stage.label, when: stage.when, amount: money(stage.grossMinor) })),
  };
}

/** Queues M7 for the first revision and M8, with what changed, for every later one. */
export async function queueQuoteMail(
  tx: Transaction,
  commission: CommissionRow,
  quote: QuoteRow,
  before: QuoteRow | null,
): Promise<void> {
  const view = customerView(quote, quote.sentAt);
  const carriage = view.lines.find((line) => line.id === 'carriage');
  const data = {
    ...quoteFacts(commission, quote),
    ...(view.tax.kind === 'export'
      ? { taxNote: 'Export: no VAT is charged here; duties and taxes may be due where it arrives.' }
      : { tax: { minor: view.totals.taxMinor, currency: view.currency } }),
    includes: [...view.specification, ...(carriage ? [carriage.label] : [])].slice(0, 20),
    roundsOfChange: view.includedRounds,
    targetMass: view.mass,
    mark: view.mark,
    leaves: leavesBetween(quote.sentAt, view.weeks),
    validUntil: view.validUntil.toISOString(),
    ...(view.outOfRangeReason ? { note: view.outOfRangeReason } : {}),
  };
  const mail = { to: commission.email, commissionId: commission.id, at: quote.sentAt };
  if (!before) {
    await queueMail(tx, { ...mail, letter: 'M7', cause: `M7:${quote.id}`, data });
    return;
  }
  const changes = changeLines(before, quote);
  await queueMail(tx, {
    ...mail,
    letter: 'M8',
    cause: `M8:${quote.id}`,
    data: { ...data, replaces: before.revision, changes },
  });
}

/** What differs for the buyer, a line each, the total first. */
export function changeLines(before: QuoteRow, after: QuoteRow): string[] {
  const [a, b] = [bodyOf(before), bodyOf(after)];
  const total = ({ priced }: typeof a) => formatMoney(priced.totals.grossMinor, priced.quoted);
  const lines = diffQuotes(a.draft, b.draft)
    .filter((change) => change.forBuyer)
    .map((change) => `${change.label}: ${change.before} → ${change.after}`);
  if (total(a) !== total(b)) lines.unshift(`Total: ${total(a)} → ${total(b)}`);
  if (lines.length === 0) lines.push('Nothing but its date: the quote stands again until the new day.');
  return lines.slice(0, 20).map((line) => (line.length > 300 ? `${line.slice(0, 297)}…` : line));
}
