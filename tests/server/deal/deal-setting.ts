import { eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { applyDesk, deskFields } from '../../../src/commission/pricing/desk-fields';
import { deskChoices } from '../../../src/commission/pricing/desk-choices';
import { deskSchema } from '../../../src/commission/pricing/desk';
import { enquirySchema, type EnquiryInput } from '../../../src/commission/enquiry/enquiry';
import type { Actor, Role } from '../../../src/commission/permissions';
import { quoteDraftSchema, type QuoteDraft } from '../../../src/commission/pricing/quote-draft';
import { demoRates } from '../../../src/demo/rates';
import { commissions } from '../../../src/server/db/schema/commissions';
import { users } from '../../../src/server/db/schema/people';
import { quoteDrafts } from '../../../src/server/db/schema/quotes';
import { mails, rateVersions } from '../../../src/server/db/schema/studio';
import { sendEnquiry } from '../../../src/server/enquiry/enquiries';
import { openDesk, saveDraft } from '../../../src/server/quote/quote-desk';
import { sendQuote } from '../../../src/server/quote/quotes';
import type { Services } from '../../../src/server/services';
import { createTestServices } from '../../setup/database';

export type Person = NonNullable<Actor>;
export const START = new Date('2027-03-01T09:00:00Z');
export const SENDER = { browserId: 'browser-of-the-test', client: '192.0.2.7' };

/** A studio with its rates, an owner, a customer, another customer, a maker and a bookkeeper; the clock can be moved. */
export interface Setting {
  services: Services;
  clock: { now: Date };
  owner: Person;
  customer: Person;
  other: Person;
  maker: Person;
  bookkeeper: Person;
  drop: () => Promise<void>;
}

export async function openSetting(): Promise<Setting> {
  const clock = { now: START };
  const { services, drop } = await createTestServices({ now: () => clock.now });
  await services.db.insert(rateVersions).values({ id: uuidv7(), rates: demoRates, createdAt: START });
  const person = async (name: string, role: Role): Promise<Person> => {
    const email = `${name}@example.org`;
    const [row] = await services.db
      .insert(users)
      .values({ name, givenName: name, email, role, createdAt: START })
      .returning();
    return { id: row!.id, role, email, name };
  };
  return {
    services,
    clock,
    owner: await person('wren', 'owner'),
    customer: await person('isolde', 'customer'),
    other: await person('rafe', 'customer'),
    maker: await person('juno', 'maker'),
    bookkeeper: await person('nessa', 'bookkeeper'),
    drop,
  };
}

let counter = 0;

/** A valid enquiry about the catalogue's leaf-shaped sword; `changes` replaces any field. */
export function enquiry(changes: Partial<Record<keyof EnquiryInput | string, unknown>> = {}) {
  counter += 1;
  return enquirySchema.parse({
    clientId: `enquiry-${String(counter).padStart(4, '0')}`,
    what: 'form',
    form: 'leaf-shaped-sword',
    name: 'Isolde Wintermere',
    email: 'isolde@example.org',
    wish: 'A sword after a find from the river, to hang above the desk.',
    use: 'display',
    designSource: 'studio-form',
    adult: true,
    consent: true,
    ...changes,
  });
}

/** A commission of the setting's customer that is an enquiry; its ref. */
export async function newEnquiry({ services, customer }: Setting, changes: Record<string, unknown> = {}) {
  const input = enquiry(changes);
  const sent = await sendEnquiry(services, customer, { ...SENDER, client: `test of ${input.clientId}` }, input);
  if (!sent.ok) throw new Error(sent.problem.message);
  return sent.value.ref;
}

/** Saves the desk's own draft with `change` applied; the version to send it by. */
export async function savedDraft(setting: Setting, ref: string, change: (draft: QuoteDraft) => QuoteDraft = (d) => d) {
  const { services, owner } = setting;
  const desk = await openDesk(services, owner, ref);
  if (!desk.ok) throw new Error(desk.problem.message);
  const fields = deskFields(change(desk.value.draft), desk.value.version);
  const saved = await saveDraft(services, owner, ref, deskSchema.parse(fields));
  if (!saved.ok) throw new Error(saved.problem.message);
  return saved.value;
}

/** Sends the next revision; throws when it is refused. */
export async function sentQuote(setting: Setting, ref: string, change?: (draft: QuoteDraft) => QuoteDraft) {
  const { version, revision } = await savedDraft(setting, ref, change);
  const sent = await sendQuote(setting.services, setting.owner, ref, { version, revision, freeze: true });
  if (!sent.ok) throw new Error(sent.problem.message);
  return sent.value;
}

/** Puts a whole draft in place of the desk's, for tests that start from a worked example. */
export async function putDraft({ services }: Setting, ref: string, draft: QuoteDraft) {
  const row = await commission({ services }, ref);
  const values = { commissionId: row.id, draft: quoteDraftSchema.parse(draft), version: 1, updatedAt: START };
  await services.db.insert(quoteDrafts).values(values);
  return { version: 1, revision: 1 };
}

export async function commission({ services }: Pick<Setting, 'services'>, ref: string) {
  const [row] = await services.db.select().from(commissions).where(eq(commissions.ref, ref));
  return row!;
}

/** The letters queued for a commission, as "M3 to isolde@example.org", in order of writing. */
export async function letters({ services }: Setting, ref: string): Promise<string[]> {
  const { id } = await commission({ services }, ref);
  const rows = await services.db.select().from(mails).where(eq(mails.commissionId, id)).orderBy(mails.id);
  return rows.map((row) => `${row.letter} to ${row.to}`);
}

/** The code of a refusal, or 'ok'. */
export function codeOf(outcome: { ok: true } | { ok: false; problem: { code: string } }): string {
  return outcome.ok ? 'ok' : outcome.problem.code;
}

export const deskOf = (draft: QuoteDraft, version: number) => deskSchema.parse(deskFields(draft, version));
export const typedOver = (draft: QuoteDraft) => applyDesk(draft, deskOf(draft, 0), deskChoices(demoRates));
