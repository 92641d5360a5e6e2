import { and, desc, eq, ne } from 'drizzle-orm';
import type { Balance } from '../../commission/balance';
import { suggestQuestions, type Suggestion } from '../../commission/enquiry/checklist';
import { DEAL_WORDS, type DealState } from '../../commission/deal';
import type { Enquiry } from '../../commission/enquiry/enquiry';
import type { Actor } from '../../commission/permissions';
import type { Estimate } from '../../commission/pricing/pricing-results';
import { done, type Outcome } from '../../commission/problem';
import { rightsObstacle, type Rights } from '../../commission/enquiry/rights';
import type { OwnerEstimate } from '../../commission/enquiry/triage';
import type { WhoseTurn } from '../../commission/turn/turn-facts';
import { findCommission, type CommissionRow } from '../commissions';
import type { Db } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { mails } from '../db/schema/studio';
import { factsOf, readUploads, type UploadRow } from '../enquiry/enquiry-mails';
import { readBalance } from '../money/ledger';
import { LETTER_NAMES, type LetterId } from '../mail/letter-ids';
import { MAIL_WORDS } from '../mail/mail-log';
import { readMessages, type MessageView } from '../enquiry/messages';
import { readAttempts, readPieces, type AttemptRow, type PieceRow } from '../making/pieces';
import { isIntact } from '../quote/quote-body';
import { standingAcceptance } from '../quote/standing-acceptance';
import { readQuotes } from '../quote/quote-view';
import { readQuestions, type QuestionRow } from '../enquiry/questions';
import { readRights } from '../enquiry/rights';
import type { Services } from '../services';
import { readHistory, type HistoryLine } from './history';
import { marginOf, type OpenMargin } from './margin-now';
import { turnOf } from './turn-facts';

/** A revision in the owner's list. */
export interface RevisionLine {
  revision: number;
  state: 'sent' | 'withdrawn' | 'accepted' | 'lapsed';
  sentAt: Date;
  validUntil: Date;
  sha256: string;
  intact: boolean;
}

/** A mail of this commission and where it stands. */
export interface MailState {
  id: string;
  /** What the letter is called, and its state, in the owner's words. */
  name: string;
  words: string;
  /** It did not arrive, or was not wanted. */
  trouble: boolean;
  to: string;
  createdAt: Date;
}

/** Everything the owner's page of one commission shows. */
export interface OwnerCommission {
  row: CommissionRow;
  dealWords: string;
  enquiry: Enquiry;
  estimate: Estimate;
  ownerEstimate: OwnerEstimate | null;
  turn: WhoseTurn;
  rights: Rights;
  rightsObstacle: string | null;
  files: UploadRow[];
  questions: QuestionRow[];
  suggestions: Suggestion[];
  revisions: RevisionLine[];
  accepted: { typedName: string; at: Date; address: string } | null;
  balance: Balance;
  margin: OpenMargin | null;
  messages: MessageView[];
  history: HistoryLine[];
  pieces: PieceRow[];
  attempts: AttemptRow[];
  mails: MailState[];
  /** Earlier commissions of the same address, with why any was declined. */
  earlier: { ref: string; title: string; deal: DealState; declineReason: string | null }[];
}

/** Reads one commission whole, for an owner. */
export async function readOwnerCommission(
  services: Services,
  actor: Actor,
  ref: string | undefined,
): Promise<Outcome<OwnerCommission>> {
  const found = await findCommission(services, actor, ref, 'commission:triage');
  if (!found.ok) return found;
  const row = found.value;
  const { db } = services;
  const now = services.now();
  const files = await readUploads(db, row.id);
  const rights = await readRights(db, row);
  const asked = await readQuestions(db, row.id);
  const texts = new Set(asked.map((question) => question.text));
  return done({
    row,
    dealWords: DEAL_WORDS[row.deal],
    enquiry: row.enquiry as Enquiry,
    estimate: row.estimate as Estimate,
    ownerEstimate: row.ownerEstimate as OwnerEstimate | null,
    turn: await turnOf(db, row, now),
    rights,
    rightsObstacle: rightsObstacle(rights),
    files,
    questions: asked,
    suggestions: suggestQuestions(factsOf(row, files)).filter((suggestion) => !texts.has(suggestion.text)),
    revisions: await revisionLines(db, row.id),
    accepted: await acceptanceOf(db, row.id),
    balance: await readBalance(db, row.id, now),
    margin: await marginOf(db, row, now),
    messages: await readMessages(db, row.id),
    history: await readHistory(db, row.id, 'studio'),
    pieces: await readPieces(db, row.id),
    attempts: await readAttempts(db, row.id),
    mails: await mailStates(db, row.id),
    earlier: await earlierOf(db, row),
  });
}

async function revisionLines(db: Db, id: string): Promise<RevisionLine[]> {
  return (await readQuotes(db, id)).map((quote) => {
    const { revision, state, sentAt, validUntil, sha256 } = quote;
    return { revision, state, sentAt, validUntil, sha256, intact: isIntact(quote) };
  });
}

async function acceptanceOf(db: Db, id: string): Promise<OwnerCommission['accepted']> {
  const row = await standingAcceptance(db, id);
  return row ? { typedName: row.typedName, at: row.acceptedAt, address: row.address } : null;
}

async function mailStates(db: Db, id: string): Promise<MailState[]> {
  const rows = await db.select().from(mails).where(eq(mails.commissionId, id)).orderBy(desc(mails.createdAt));
  return rows.map((row) => ({
    id: row.id,
    name: LETTER_NAMES[row.letter as LetterId] ?? row.letter,
    words: MAIL_WORDS[row.state],
    trouble: ['bounced', 'complained', 'failed'].includes(row.state),
    to: row.to,
    createdAt: row.createdAt,
  }));
}

function earlierOf(db: Db, row: CommissionRow): Promise<OwnerCommission['earlier']> {
  return db
    .select({
      ref: commissions.ref,
      title: commissions.title,
      deal: commissions.deal,
      declineReason: commissions.declineReason,
    })
    .from(commissions)
    .where(and(eq(commissions.email, row.email), ne(commissions.id, row.id)))
    .orderBy(desc(commissions.createdAt))
    .limit(10);
}
