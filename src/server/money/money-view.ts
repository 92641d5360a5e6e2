import { desc, eq, inArray } from 'drizzle-orm';
import type { Balance } from '../../commission/balance';
import type { DealState } from '../../commission/deal';
import { may, type Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { commissions } from '../db/schema/commissions';
import { ledgerEntries, quotes, stagePayments } from '../db/schema/quotes';
import { readBalances } from './ledger';
import type { Services } from '../services';

/** States in which money received is still owed in work: deposits held, not earned. */
const HELD: readonly DealState[] = ['agreed', 'booked', 'making', 'held', 'finished', 'sent', 'lost'];
/** Booked work with money still to come. */
const TO_COME: readonly DealState[] = ['booked', 'making', 'held', 'finished'];

/** Of these nothing more is to come, whatever was agreed. */
const ENDED: readonly DealState[] = ['lapsed', 'declined', 'cancelled'];

function nothingToCome(balance: Balance): Balance {
  return { ...balance, toComeMinor: 0, dueMinor: 0, overdueMinor: 0 };
}

/** One commission's line on the money page. Amounts in minor units of its currency. */
export interface MoneyLine {
  ref: string;
  title: string;
  customer: string;
  deal: DealState;
  balance: Balance;
  /** The revision that was accepted. */
  revision: number | null;
}

/** Sums of one currency, minor units. */
export interface MoneyTotals {
  currency: string;
  heldMinor: number;
  toComeMinor: number;
  dueMinor: number;
  overdueMinor: number;
}

/** A booked line of the ledger, newest first. */
export interface MovedLine {
  at: string;
  ref: string;
  kind: string;
  label: string | null;
  amountMinor: number;
  currency: string;
  receiptNo: number | null;
}

/** What the money page shows to the owner and the bookkeeper. */
export interface MoneyPage {
  lines: MoneyLine[];
  totals: MoneyTotals[];
  moved: MovedLine[];
}

/** Reads every commission with agreed money, its balance, the sums by currency and the last 50 ledger lines. */
export async function readMoney(services: Services, actor: Actor): Promise<Outcome<MoneyPage>> {
  // Customers read money too, but only their own and on their own page.
  if (!may(actor, 'money:read'))
    return refuse(actor ? 'not-allowed' : 'sign-in-needed', 'This page is for the owner and the bookkeeper.');
  const { db } = services;
  const agreed = await db.selectDistinct({ id: stagePayments.commissionId }).from(stagePayments);
  const rows = await db
    .select()
    .from(commissions)
    .where(
      inArray(
        commissions.id,
        agreed.map((each) => each.id),
      ),
    )
    .orderBy(desc(commissions.ref));
  const balances = await readBalances(
    db,
    rows.map((row) => row.id),
    services.now(),
  );
  const accepted = await db
    .select({ id: quotes.commissionId, revision: quotes.revision })
    .from(quotes)
    .where(eq(quotes.state, 'accepted'));
  const lines = rows.map((row) => ({
    ref: row.ref,
    title: row.title,
    customer: row.customerName,
    deal: row.deal,
    balance: ENDED.includes(row.deal) ? nothingToCome(balances.get(row.id)!) : balances.get(row.id)!,
    revision: accepted.find((quote) => quote.id === row.id)?.revision ?? null,
  }));
  return done({ lines, totals: totalsOf(lines), moved: await lastMoved(services) });
}

/** Adds up lines by currency: held on work not yet delivered, still to come on booked work, due and overdue of that. */
export function totalsOf(lines: readonly Pick<MoneyLine, 'deal' | 'balance'>[]): MoneyTotals[] {
  const byCurrency = new Map<string, MoneyTotals>();
  const sumOf = (currency: string) => {
    const sum = byCurrency.get(currency) ?? { currency, heldMinor: 0, toComeMinor: 0, dueMinor: 0, overdueMinor: 0 };
    byCurrency.set(currency, sum);
    return sum;
  };
  for (const { deal, balance } of lines) {
    const sum = sumOf(balance.currency);
    if (HELD.includes(deal)) {
      sum.heldMinor += balance.receivedMinor + balance.unmatchedMinor;
      for (const { currency, minor } of balance.foreign) sumOf(currency).heldMinor += minor;
    }
    if (TO_COME.includes(deal)) {
      sum.toComeMinor += balance.toComeMinor;
      sum.dueMinor += balance.dueMinor;
      sum.overdueMinor += balance.overdueMinor;
    }
  }
  return [...byCurrency.values()].sort((a, b) => b.currency.localeCompare(a.currency));
}

async function lastMoved({ db }: Services): Promise<MovedLine[]> {
  const rows = await db
    .select({ entry: ledgerEntries, ref: commissions.ref, label: stagePayments.label })
    .from(ledgerEntries)
    .innerJoin(commissions, eq(commissions.id, ledgerEntries.commissionId))
    .leftJoin(stagePayments, eq(stagePayments.id, ledgerEntries.stagePaymentId))
    .orderBy(desc(ledgerEntries.at), desc(ledgerEntries.id))
    .limit(50);
  return rows.map(({ entry, ref, label }) => ({
    at: entry.at.toISOString(),
    ref,
    kind: entry.kind,
    label,
    amountMinor: entry.amountMinor,
    currency: entry.currency,
    receiptNo: entry.receiptNo,
  }));
}
