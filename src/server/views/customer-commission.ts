import { and, desc, eq } from 'drizzle-orm';
import type { Balance } from '../../commission/balance';
import { DEAL_WORDS, type DealState } from '../../commission/deal';
import type { Enquiry } from '../../commission/enquiry/enquiry';
import type { EstimateRequest } from '../../commission/pricing/estimate-request';
import type { Actor } from '../../commission/permissions';
import type { Estimate } from '../../commission/pricing/pricing-results';
import { done, refuse, type Outcome } from '../../commission/problem';
import type { CustomerQuote } from '../../commission/quote-view';
import type { OwnerEstimate } from '../../commission/enquiry/triage';
import type { WhoseTurn } from '../../commission/turn/turn-facts';
import { findCommission, type CommissionRow } from '../commissions';
import { commissions } from '../db/schema/commissions';
import { readUploads, type UploadRow } from '../enquiry/enquiry-mails';
import { readBalance } from '../money/ledger';
import { readMessages, type MessageView } from '../enquiry/messages';
import { customerView, readQuotes } from '../quote/quote-view';
import { readQuestions } from '../enquiry/questions';
import type { Services } from '../services';
import { readHistory, type HistoryLine } from './history';
import { turnOf, turnsOf } from './turn-facts';

/** A file as its sender sees it. */
export interface CustomerFile {
  id: string;
  name: string;
  kind: UploadRow['kind'];
  bytes: number;
  hasThumb: boolean;
}

/** A question as the customer answers it. */
export interface CustomerQuestion {
  id: string;
  round: number;
  text: string;
  why: string;
  answer: string | null;
}

/** One commission as its customer sees it up to acceptance, and its money and history after. Named fields only. */
export interface CustomerCommission {
  id: string;
  ref: string;
  title: string;
  deal: DealState;
  dealWords: string;
  pieces: number;
  alloy: string;
  bladed: boolean;
  createdAt: Date;
  leaves: { from: string; to: string } | null;
  declineReason: string | null;
  /** Country the price was worked out for (ISO 3166-1), and the address for the parcel once given. */
  destination: string;
  shipping: CommissionRow['shipping'];
  wish: string;
  request: EstimateRequest;
  estimate: Estimate;
  ownerEstimate: OwnerEstimate | null;
  turn: WhoseTurn;
  files: CustomerFile[];
  questions: CustomerQuestion[];
  /** Every revision that was sent, the oldest first. */
  quotes: CustomerQuote[];
  balance: Balance;
  messages: MessageView[];
  history: HistoryLine[];
}

/** Reads one commission for its customer (or an owner looking at what the customer sees). */
export async function readCustomerCommission(
  services: Services,
  actor: Actor,
  ref: string | undefined,
): Promise<Outcome<CustomerCommission>> {
  const found = await findCommission(services, actor, ref, 'commission:read');
  if (!found.ok) return found;
  const row = found.value;
  const { db } = services;
  const now = services.now();
  return done({
    ...plainFields(row),
    turn: await turnOf(db, row, now),
    files: (await readUploads(db, row.id)).map(fileView),
    questions: (await readQuestions(db, row.id)).map(({ id, round, text, why, answer }) => ({
      id,
      round,
      text,
      why,
      answer,
    })),
    quotes: (await readQuotes(db, row.id)).map((quote) => customerView(quote, now)),
    balance: await readBalance(db, row.id, now),
    messages: await readMessages(db, row.id),
    history: await readHistory(db, row.id, 'customer'),
  });
}

function plainFields(row: CommissionRow) {
  const { id, ref, title, deal, pieces, alloy, bladed, createdAt, declineReason, leavesFrom, leavesTo } = row;
  const { destination, shipping } = row;
  return {
    id,
    ref,
    title,
    deal,
    dealWords: DEAL_WORDS[deal],
    pieces,
    alloy,
    bladed,
    createdAt,
    declineReason,
    destination,
    shipping,
    leaves: leavesFrom && leavesTo ? { from: leavesFrom, to: leavesTo } : null,
    wish: (row.enquiry as Enquiry).wish,
    request: row.estimateRequest as EstimateRequest,
    estimate: row.estimate as Estimate,
    ownerEstimate: row.ownerEstimate as OwnerEstimate | null,
  };
}

function fileView({ id, displayName, kind, bytes, thumbKey }: UploadRow): CustomerFile {
  return { id, name: displayName, kind, bytes, hasThumb: thumbKey !== null };
}

/** A line of a customer's own list. */
export interface CustomerLine {
  ref: string;
  title: string;
  deal: DealState;
  dealWords: string;
  turn: WhoseTurn;
  leaves: { from: string; to: string } | null;
}

/** All commissions of the signed-in customer, the newest first. */
export async function listCustomerCommissions(services: Services, actor: Actor): Promise<Outcome<CustomerLine[]>> {
  if (!actor) return refuse('sign-in-needed', 'Sign in to see your commissions.');
  const rows = await services.db
    .select()
    .from(commissions)
    .where(and(eq(commissions.customerId, actor.id)))
    .orderBy(desc(commissions.createdAt));
  const turns = await turnsOf(services.db, rows, services.now());
  return done(
    rows.map((row) => {
      const { ref, title, deal, dealWords, leaves } = plainFields(row);
      return { ref, title, deal, dealWords, leaves, turn: turns.get(row.id)! };
    }),
  );
}
