import { and, asc, eq, isNotNull } from 'drizzle-orm';
import { commissions, uploads } from '../../../src/server/db/schema/commissions';
import { photos } from '../../../src/server/db/schema/making';
import { checkoutSessions, ledgerEntries, quotes, stagePayments } from '../../../src/server/db/schema/quotes';
import { mails } from '../../../src/server/db/schema/studio';
import type { Services } from '../../../src/server/services';
import { benchPhoto } from '../sample-files';
import { personOf } from '../scene';
import { places } from '../studio';
import type { Target } from './expected';

/** Values for a pattern's places, and whose they are. */
export interface Named {
  target: Target;
  customerId: string | null;
  ref: string;
  revision: string;
  no: string;
  photo: string;
  upload: string;
  mail: string;
  session: string;
}

const NOBODY = '01890000-0000-7000-8000-00000000ffff';

/** A commission of the demo with all that routes can name of it. */
export async function placesOf(services: Services, ref: string, target: Target): Promise<Named> {
  const { db } = services;
  const [row] = await db.select().from(commissions).where(eq(commissions.ref, ref));
  const id = row!.id;
  const [quote] = await db.select().from(quotes).where(eq(quotes.commissionId, id)).orderBy(asc(quotes.revision));
  const [entry] = await db
    .select()
    .from(ledgerEntries)
    .where(and(eq(ledgerEntries.commissionId, id), isNotNull(ledgerEntries.receiptNo)));
  const [photo] = await db
    .select()
    .from(photos)
    .where(and(eq(photos.commissionId, id), eq(photos.shared, true)));
  const [mail] = await db.select().from(mails).where(eq(mails.commissionId, id));
  const parts = { quote, entry, photo, mail };
  for (const [name, part] of Object.entries(parts)) if (!part) throw new Error(`${ref} of the demo has no ${name}`);
  return {
    target,
    customerId: row!.customerId,
    ref,
    revision: `${quote!.revision}`,
    no: `${entry!.receiptNo}`,
    photo: photo!.id,
    upload: await pictureOf(services, row!),
    mail: mail!.id,
    session: await payPageOf(services, row!),
  };
}

/** A picture that came with the enquiry: sent through the door by a browser, then put with the commission. */
async function pictureOf({ db }: Services, { id, customerId }: typeof commissions.$inferSelect): Promise<string> {
  const form = new FormData();
  const { name, mimeType, buffer } = await benchPhoto('find.jpg', '#8a7040');
  form.set('clientId', `picture-for-${id}`);
  form.set('file', new Blob([new Uint8Array(buffer)], { type: mimeType }), name);
  const sent = await fetch(`${places.url}/api/uploads`, {
    method: 'POST',
    body: form,
    headers: { origin: places.url },
  });
  const { id: upload } = (await sent.json()) as { id: string };
  await db.update(uploads).set({ commissionId: id, ownerId: customerId }).where(eq(uploads.id, upload));
  return upload;
}

/** A payment page that was made for one of the commission's stages. */
async function payPageOf({ db }: Services, { id }: typeof commissions.$inferSelect): Promise<string> {
  const [stage] = await db.select().from(stagePayments).where(eq(stagePayments.commissionId, id));
  const { quoteId, currency, grossMinor } = stage!;
  const session = `cs_test_matrix_${id}`;
  const [createdAt, expiresAt] = [new Date(), new Date(Date.now() + 3_600_000)];
  const page = { commissionId: id, stagePaymentId: stage!.id, quoteId, currency, amountMinor: grossMinor };
  await db
    .insert(checkoutSessions)
    .values({ id: session, url: `${places.payUrl}/pay/${session}`, state: 'expired', createdAt, expiresAt, ...page })
    .onConflictDoNothing();
  return session;
}

/** Places at which nothing is. */
export const NOWHERE: Named = {
  target: 'none',
  customerId: null,
  ref: 'MF-9999',
  revision: '1',
  no: '999999',
  photo: NOBODY,
  upload: NOBODY,
  mail: NOBODY,
  session: 'cs_test_nothing',
};

/** True when a route's answer depends on whose thing it names. */
export function isAboutSomething(pattern: string): boolean {
  return /\[(ref|id|revision|no)\]/.test(pattern) && !/\/(people|mails|tray)\//.test(pattern);
}

/** The pattern with its places filled in. */
export async function fillIn(services: Services, pattern: string, named: Named): Promise<string> {
  const pell = pattern.startsWith('/api/people') ? (await personOf(services, 'pell.ombersley@example.org')).id : '';
  const id = pattern.includes('/photos/')
    ? named.photo
    : pattern.includes('/uploads/')
      ? named.upload
      : pattern.includes('/mails/')
        ? named.mail
        : pell || NOBODY;
  return pattern
    .replace('[ref]', named.ref)
    .replace('[session]', named.session)
    .replace('[revision]', named.revision)
    .replace('[no]', named.no)
    .replace('[id]', id)
    .replace('[size]', 'thumb')
    .replace('[form]', 'palstave')
    .replace('[alloy]', 'tin-bronze-90-10')
    .replace('[...auth]', 'session');
}
