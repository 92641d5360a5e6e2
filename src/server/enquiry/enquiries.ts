import { and, eq, sql } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { requestOf, type Enquiry } from '../../commission/enquiry/enquiry';
import { may, type Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { limit } from '../auth/limit';
import { claimUploads, findClaimable } from './claim-uploads';
import type { CommissionRow } from '../commissions';
import { customerFor, welcomeEnquiry } from './confirm-enquiries';
import type { Db, Transaction } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { checkEnquiry, type CheckedEnquiry } from './enquiry-check';
import type { Services } from '../services';
import { mailSignIn } from '../people/sign-in';
import { readStudio } from '../studio';

/** Who sends an enquiry, as far as limits and files need to know. */
export interface Sender {
  browserId: string;
  /** Network address that limits count by. */
  client: string;
}

/** A sent enquiry. `confirmed` false: it counts once the mailed link or code was used. */
export interface SentEnquiry {
  ref: string;
  title: string;
  email: string;
  confirmed: boolean;
}

/**
 * Takes in an enquiry (T1). The estimate is reckoned again here and kept with its inputs. A signed-in customer's counts
 * at once; a guest's waits for its address to be confirmed; an owner may enter one for somebody on the telephone. The
 * same client id again answers with the commission it made.
 */
export async function sendEnquiry(
  services: Services,
  actor: Actor,
  sender: Sender,
  input: Enquiry,
): Promise<Outcome<SentEnquiry>> {
  if (!may(actor, 'enquiry:send'))
    return refuse('not-allowed', 'Enquiries come from customers, or from an owner on their behalf.');
  const known = await knownEnquiry(services.db, actor, sender, input.clientId);
  if (known) return known;
  const checked = await checkEnquiry(services, actor, input);
  if (!checked.ok) return checked;
  const allowed = await limit(services, 'enquiry', sender.client);
  if (!allowed.ok) return allowed;
  const mayMail = actor ? done(null) : await limit(services, 'link-address', checked.value.email);
  if (!mayMail.ok) return mayMail;
  return services.db.transaction(async (tx) => {
    const files = await findClaimable(tx, input.uploads, sender.browserId, actor);
    if (!files.ok) return files;
    const row = await insertEnquiry(services, tx, actor, sender, input, checked.value);
    if (!row) return (await knownEnquiry(tx, actor, sender, input.clientId)) ?? lostNumber();
    await claimUploads(tx, row, files.value);
    if (row.confirmedAt) await welcomeEnquiry(tx, row, actor, row.confirmedAt);
    else await askToConfirm(tx, services, row);
    return done(sentOf(row));
  });
}

/** Mails a guest the link and code that confirm the address and lead to the commission's page. */
function askToConfirm(tx: Transaction, services: Services, row: CommissionRow): Promise<void> {
  const { ref, title, email } = row;
  return mailSignIn(tx, services, { email, next: `/commissions/${ref}`, enquiry: { ref, title } });
}

async function insertEnquiry(
  services: Services,
  tx: Transaction,
  actor: Actor,
  sender: Sender,
  input: Enquiry,
  { email, subject, bladed, estimate, currency }: CheckedEnquiry,
): Promise<CommissionRow | undefined> {
  const at = services.now();
  const customerId = actor ? await customerFor(tx, actor, { ...input, email }, at) : null;
  const { clientId, website: _trap, ...enquiry } = input;
  const request = requestOf(input);
  const [row] = await tx
    .insert(commissions)
    .values({
      id: uuidv7(),
      ref: await nextRef(tx),
      customerId,
      email,
      customerName: input.name,
      phone: input.phone ?? null,
      confirmedAt: customerId ? at : null,
      browserId: sender.browserId,
      clientId,
      title: subject.title,
      formSlug: subject.form?.slug ?? null,
      alloy: subject.alloy.code,
      family: subject.family.code,
      pieces: request.pieces,
      bladed,
      enquiry: { ...enquiry, email },
      estimateRequest: request,
      estimate,
      currency,
      destination: request.destination,
      neededBy: input.neededBy === 'date' ? (input.neededByDate ?? null) : null,
      buyer: { kind: request.buyer },
      createdAt: at,
      updatedAt: at,
    })
    .onConflictDoNothing({ target: commissions.clientId })
    .returning();
  return row;
}

/** The next shown number: the studio's prefix and at least four digits. */
async function nextRef(tx: Transaction): Promise<string> {
  const { refPrefix } = await readStudio(tx);
  const result = await tx.execute<{ n: string }>(sql`select nextval('commission_ref') as n`);
  return `${refPrefix}-${String(result.rows[0]!.n).padStart(4, '0')}`;
}

async function knownEnquiry(
  db: Db,
  actor: Actor,
  sender: Sender,
  clientId: string,
): Promise<Outcome<SentEnquiry> | null> {
  const [row] = await db.select().from(commissions).where(eq(commissions.clientId, clientId));
  if (!row) return null;
  const isSameSender = row.browserId === sender.browserId || (actor !== null && row.customerId === actor.id);
  return isSameSender ? done(sentOf(row)) : lostNumber();
}

function lostNumber() {
  return refuse('conflict', 'This form was sent from another browser before. Reload the page and send it again.');
}

function sentOf(row: CommissionRow): SentEnquiry {
  return { ref: row.ref, title: row.title, email: row.email, confirmed: row.confirmedAt !== null };
}

/** An unconfirmed enquiry of this browser, for the page that asks to look into the mail; null when there is none. */
export async function waitingEnquiry(
  { db }: { db: Db },
  browserId: string,
  ref: string,
): Promise<{ ref: string; title: string; email: string } | null> {
  const [row] = await db
    .select()
    .from(commissions)
    .where(and(eq(commissions.ref, ref), eq(commissions.browserId, browserId)));
  return row && row.confirmedAt === null ? { ref: row.ref, title: row.title, email: row.email } : null;
}
