import { eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { formatMoney } from '../../commission/money';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import type { Acceptance } from '../../commission/enquiry/triage';
import { queueAcceptanceMails } from './acceptance-mails';
import { findCommission, lockCommission, type CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { acceptances, quotes, stagePayments } from '../db/schema/quotes';
import { standingAcceptance } from './standing-acceptance';
import { moveDeal } from '../history';
import { firstDue } from './promised-days';
import { bodyOf, isIntact, type QuoteRow } from './quote-body';
import { readQuotes } from './quote-view';
import type { Services } from '../services';

const TRIGGERS = { deposit: 'acceptance', 'gate-a': 'gate-a', balance: 'before-dispatch' } as const;

/** What the customer is told after accepting; the same to everybody who presses twice. */
export interface Agreed {
  revision: number;
  sha256: string;
  acceptedAt: Date;
}

/**
 * Accepts the quote in force (T11): one acceptance, whoever presses how often. Keeps the typed name, time, network
 * address, declarations and both fingerprints, writes the agreed stage payments and makes the first one due.
 *
 * @param address network address the press came from; kept as evidence
 */
export async function acceptQuote(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: Acceptance,
  address: string,
): Promise<Outcome<Agreed>> {
  const found = await findCommission(services, actor, ref, 'quote:accept');
  if (!found.ok) return found;
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    const all = await readQuotes(tx, commission.id);
    const quote = all.find((each) => each.revision === input.revision);
    if (!quote) return refuse('not-found', `There is no revision ${input.revision} of this quote.`);
    const before = await alreadyAccepted(tx, commission, quote, actor);
    if (before) return before;
    const obstacle = obstacleTo(quote, all, commission, input, services.now());
    if (obstacle) return obstacle;
    return agree(services, tx, { commission, quote, actor, input, address });
  });
}

async function alreadyAccepted(
  tx: Transaction,
  commission: CommissionRow,
  quote: QuoteRow,
  actor: Actor,
): Promise<Outcome<Agreed> | null> {
  const row = await standingAcceptance(tx, commission.id);
  if (!row) return null;
  if (row.quoteId === quote.id && row.acceptedBy === actor!.id)
    return done({ revision: quote.revision, sha256: row.quoteSha256, acceptedAt: row.acceptedAt });
  return refuse('conflict', 'Another revision of this quote was accepted before. It is the one that counts.');
}

function obstacleTo(quote: QuoteRow, all: QuoteRow[], commission: CommissionRow, input: Acceptance, now: Date) {
  const newest = all.at(-1)!;
  if (quote.state === 'withdrawn')
    return refuse(
      'stale',
      newest.revision > quote.revision && newest.state === 'sent'
        ? `Revision ${quote.revision} was withdrawn; revision ${newest.revision} took its place. Open it to see what changed.`
        : `Revision ${quote.revision} was withdrawn. We are working on a new one and will write to you.`,
    );
  if (quote.state === 'lapsed' || quote.validUntil <= now)
    return refuse('stale', 'This quote’s date has passed. Write to us and we price it again; nothing is owed.');
  if (commission.bladed && !input.adult) {
    const message = 'This piece is a blade. Tick that you are 18 or over; the carrier asks again at the door.';
    return refuse('invalid', message, { adult: message });
  }
  if (!isIntact(quote)) throw new Error(`quote ${quote.id} no longer has its own fingerprint`);
  return null;
}

interface Agreeing {
  commission: CommissionRow;
  quote: QuoteRow;
  actor: Actor;
  input: Acceptance;
  address: string;
}

async function agree(services: Services, tx: Transaction, agreeing: Agreeing): Promise<Outcome<Agreed>> {
  const { commission, quote, actor, input, address } = agreeing;
  const at = services.now();
  const body = bodyOf(quote);
  const moved = await moveDeal(tx, commission, {
    move: 'T11',
    mover: 'customer',
    actor,
    sentence: `Revision ${quote.revision} was accepted: ${formatMoney(body.priced.totals.grossMinor, body.priced.quoted)} in all.`,
    public: true,
    at,
    data: { revision: quote.revision, sha256: quote.sha256, terms: body.terms, typedName: input.typedName },
  });
  if (!moved.ok) return moved;
  await tx.update(quotes).set({ state: 'accepted', closedAt: at }).where(eq(quotes.id, quote.id));
  const { terms, bespoke, mark, adult } = input;
  await tx.insert(acceptances).values({
    quoteId: quote.id,
    commissionId: commission.id,
    quoteSha256: quote.sha256,
    termsVersion: body.terms.version,
    termsSha256: body.terms.sha256,
    typedName: input.typedName,
    acceptedBy: actor!.id,
    address,
    declarations: { terms, bespoke, mark, adult },
    acceptedAt: at,
  });
  await writeStages(tx, commission, quote, at);
  await takeOver(tx, commission, quote, at);
  await queueAcceptanceMails(tx, commission, quote, input.typedName, at);
  return done({ revision: quote.revision, sha256: quote.sha256, acceptedAt: at });
}

async function writeStages(tx: Transaction, commission: CommissionRow, quote: QuoteRow, at: Date): Promise<void> {
  const { priced } = bodyOf(quote);
  const stages = priced.stages.filter((stage) => stage.grossMinor > 0);
  await tx.insert(stagePayments).values(
    stages.map((stage, index) => ({
      id: uuidv7(),
      commissionId: commission.id,
      quoteId: quote.id,
      position: index + 1,
      label: stage.label,
      trigger: TRIGGERS[stage.id],
      currency: priced.quoted,
      netMinor: stage.netMinor,
      taxMinor: stage.taxMinor,
      grossMinor: stage.grossMinor,
      dueAt: index === 0 ? firstDue(commission.buyer, at) : null,
    })),
  );
}

/** From now on the commission is what the quote says. */
async function takeOver(tx: Transaction, commission: CommissionRow, quote: QuoteRow, at: Date): Promise<void> {
  const { draft, priced } = bodyOf(quote);
  await tx
    .update(commissions)
    .set({
      title: draft.title,
      pieces: draft.pieces,
      alloy: draft.metal.code,
      family: draft.soundness.family,
      currency: priced.quoted,
      updatedAt: at,
    })
    .where(eq(commissions.id, commission.id));
}
