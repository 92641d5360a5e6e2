import { asc, eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { studioAlloy } from '../../casting/studio-alloys';
import { countryName } from '../../commission/countries';
import { suggestQuestions, type EnquiryFacts } from '../../commission/enquiry/checklist';
import { neededByWords, requestOf, type Enquiry } from '../../commission/enquiry/enquiry';
import { DESIGN_SOURCES, INTENDED_USES } from '../../commission/enquiry/enquiry-choices';
import { currencySchema, formatMoney } from '../../commission/money';
import type { CommissionRow } from '../commissions';
import type { Db, Transaction } from '../db/client';
import { uploads } from '../db/schema/commissions';
import { queueMail } from '../outbox';
import { ownerAddresses } from '../people/owners';
import { answerDay } from '../quote/promised-days';

export type UploadRow = typeof uploads.$inferSelect;

/** The files sent with a commission, the oldest first. */
export function readUploads(db: Db, commissionId: string): Promise<UploadRow[]> {
  return db.select().from(uploads).where(eq(uploads.commissionId, commissionId)).orderBy(asc(uploads.createdAt));
}

/** What the checklist looks at, from a commission and its files. */
export function factsOf(commission: CommissionRow, files: readonly UploadRow[]): EnquiryFacts {
  const enquiry = commission.enquiry as Enquiry;
  const request = requestOf(enquiry);
  return {
    what: request.what,
    use: enquiry.use,
    designSource: enquiry.designSource,
    ...(enquiry.licence ? { licence: enquiry.licence } : {}),
    bladed: commission.bladed,
    hafted: request.haft !== undefined && request.haft !== 'none',
    pieces: commission.pieces,
    neededBy: enquiry.neededBy,
    files: files.map((file) => ({
      kind: file.kind,
      ...(file.measure ? { closed: file.measure.closed } : {}),
    })),
  };
}

/** The enquiry in facts, for letters: what was asked for, in the customer's own choices. */
export function summaryOf(commission: CommissionRow): { label: string; value: string }[] {
  const enquiry = commission.enquiry as Enquiry;
  const { wish } = enquiry;
  const facts = [
    { label: 'Piece', value: commission.title },
    { label: 'Number of pieces', value: String(commission.pieces) },
    { label: 'Metal', value: studioAlloy(commission.alloy)?.name ?? commission.alloy },
    { label: 'What is wanted', value: wish.length > 280 ? `${wish.slice(0, 277)}…` : wish },
    { label: 'For', value: INTENDED_USES[enquiry.use] },
    { label: 'Needed by', value: neededByWords(enquiry) },
    { label: 'Goes to', value: countryName(commission.destination) },
    { label: 'Design', value: DESIGN_SOURCES[enquiry.designSource] },
  ];
  if (!enquiry.budget) return facts;
  const currency = currencySchema.parse(commission.currency);
  return [...facts, { label: 'Budget', value: formatMoney(enquiry.budget * 100, currency, { pence: 'whole' }) }];
}

/** Queues M1 to the customer and M2 to every owner, once for each enquiry. */
export async function queueEnquiryMails(tx: Transaction, commission: CommissionRow, at: Date): Promise<void> {
  const files = await readUploads(tx, commission.id);
  await queueMail(tx, {
    letter: 'M1',
    to: commission.email,
    cause: `M1:${commission.id}`,
    commissionId: commission.id,
    at,
    data: {
      ref: commission.ref,
      title: commission.title,
      name: commission.customerName,
      received: summaryOf(commission),
      files: files.map((file) => file.displayName),
      answerBy: answerDay(at),
      books: 'open',
    },
  });
  await queueStudioMail(tx, commission, 'enquiry', at);
}

/** Queues M2 to every owner: a new enquiry, or answers to a round of questions. */
export async function queueStudioMail(
  tx: Transaction,
  commission: CommissionRow,
  kind: 'enquiry' | 'answers',
  at: Date,
): Promise<void> {
  const files = await readUploads(tx, commission.id);
  const time = kind === 'answers' ? `:${uuidv7()}` : '';
  const missing = suggestQuestions(factsOf(commission, files)).map((suggestion) => suggestion.text);
  for (const owner of await ownerAddresses(tx)) {
    await queueMail(tx, {
      letter: 'M2',
      to: owner.email,
      cause: `M2:${commission.id}:${kind}${time}:${owner.email}`,
      commissionId: commission.id,
      at,
      data: {
        ref: commission.ref,
        title: commission.title,
        name: owner.name,
        kind,
        customer: commission.customerName,
        summary: summaryOf(commission),
        missing: kind === 'enquiry' ? missing : [],
        files: files.length,
      },
    });
  }
}
