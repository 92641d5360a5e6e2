import { eq, sql } from 'drizzle-orm';
import { enquirySchema, type EnquiryInput } from '../../commission/enquiry/enquiry';
import { quoteDraftSchema, type QuoteDraft } from '../../commission/pricing/quote-draft';
import { CURRENT_TERMS } from '../../commission/terms';
import { sendEstimateSchema } from '../../commission/enquiry/triage';
import { acceptQuote } from '../../server/quote/acceptance';
import { commissions } from '../../server/db/schema/commissions';
import { quoteDrafts } from '../../server/db/schema/quotes';
import { sendEnquiry } from '../../server/enquiry/enquiries';
import { sendMessage } from '../../server/enquiry/messages';
import { openDesk } from '../../server/quote/quote-desk';
import { sendQuote } from '../../server/quote/quotes';
import { sendEstimate } from '../../server/enquiry/triage';
import { receiveUpload } from '../../server/uploads/receive-upload';
import { commissionOf, must, type World } from '../world';

/** A file somebody sends with an enquiry. */
export interface SentFile {
  name: string;
  type: string;
  bytes: Uint8Array<ArrayBuffer>;
}

type Asked = Omit<Partial<EnquiryInput>, 'clientId' | 'name' | 'email' | 'consent'> & { wish: string };

/** An enquiry under the number the demo gives it, with its files, sent by `who`: its customer, or an owner for them. */
export async function enquire(
  world: World,
  ref: string,
  customer: string,
  asked: Asked,
  files: SentFile[] = [],
  who = customer,
): Promise<void> {
  const { services } = world;
  const { name, email } = world.person(customer);
  const browserId = `demo-browser-of-${customer}`;
  const uploads: string[] = [];
  for (const file of files) uploads.push(await sendFile(world, who, browserId, file));
  const number = Number(ref.slice(ref.indexOf('-') + 1));
  await services.db.execute(sql`select setval('commission_ref', ${number}, false)`);
  const input = enquirySchema.parse({
    use: 'display',
    designSource: 'studio-form',
    ...asked,
    clientId: world.newId(`${ref}-enquiry`),
    name,
    email,
    uploads,
    consent: true,
  });
  const sender = { browserId, client: `192.0.2.${number % 250}` };
  must(await sendEnquiry(services, world.person(who), sender, input), `${ref} enquiry`);
}

async function sendFile(world: World, who: string, browserId: string, file: SentFile): Promise<string> {
  const form = new FormData();
  form.set('clientId', world.newId('file'));
  form.set('file', new File([file.bytes], file.name, { type: file.type }));
  const request = new Request('http://localhost/', { method: 'POST', body: form });
  return must(await receiveUpload(world.services, world.person(who), browserId, request), file.name).id;
}

/** The owner's range, amounts in whole units of the commission's currency. */
export async function estimateSent(
  world: World,
  ref: string,
  range: { low: number; high: number; weeks: [number, number]; drivers: string[]; assumptions: string[] },
): Promise<void> {
  const input = sendEstimateSchema.parse({
    lowMinor: String(range.low),
    highMinor: String(range.high),
    drivers: range.drivers.join('\n'),
    assumptions: range.assumptions.join('\n'),
    earliestWeeks: String(range.weeks[0]),
    latestWeeks: String(range.weeks[1]),
  });
  must(await sendEstimate(world.services, world.person('wren'), ref, input), `${ref} estimate`);
}

/** Sends the next quote revision: the desk's own draft as it opens, or what `change` makes of it. */
export async function quote(
  world: World,
  ref: string,
  change: (draft: QuoteDraft) => QuoteDraft = (draft) => draft,
): Promise<void> {
  const { services } = world;
  const wren = world.person('wren');
  const desk = must(await openDesk(services, wren, ref), `${ref} desk`);
  const draft = quoteDraftSchema.parse({ ...change(desk.draft), termsVersion: CURRENT_TERMS.version });
  const version = desk.version + 1;
  const kept = { draft, version, updatedAt: services.now() };
  await services.db
    .insert(quoteDrafts)
    .values({ commissionId: desk.commission.id, ...kept })
    .onConflictDoUpdate({ target: quoteDrafts.commissionId, set: kept });
  must(await sendQuote(services, wren, ref, { version, revision: desk.revision, freeze: true }), `${ref} quote`);
}

/** The customer accepts the newest revision under a typed name. */
export async function accept(
  world: World,
  ref: string,
  customer: string,
  typedName: string,
  revision = 1,
): Promise<void> {
  const { bladed } = await commissionOf(world, ref);
  const input = { revision, typedName, terms: true, bespoke: true, mark: true, adult: bladed };
  must(
    await acceptQuote(world.services, world.person(customer), ref, input, '198.51.100.23'),
    `${ref} acceptance of revision ${revision}`,
  );
}

/** Where the parcel will go, as the customer gave it. */
export async function address(world: World, ref: string, lines: string[], country = 'GB'): Promise<void> {
  const { phone } = await commissionOf(world, ref);
  const shipping = { lines, country, ...(phone ? { phone } : {}) };
  await world.services.db.update(commissions).set({ shipping }).where(eq(commissions.ref, ref));
}

/** A message from one side to the other. */
export async function message(world: World, ref: string, who: string, body: string): Promise<void> {
  const clientId = world.newId(`${ref}-message`);
  must(await sendMessage(world.services, world.person(who), ref, { clientId, body }), `${ref} message`);
}
