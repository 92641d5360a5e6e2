import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import type { Actor, Role } from '../../src/commission/permissions';
import { acceptQuote } from '../../src/server/quote/acceptance';
import { openSession } from '../../src/server/auth/session';
import { users } from '../../src/server/db/schema/people';
import { readBalance } from '../../src/server/money/ledger';
import type { Services } from '../../src/server/services';
import { commission, newEnquiry, sentQuote, type Setting } from '../server/deal/deal-setting';
import { Visitor } from './visitor';

export type Person = NonNullable<Actor>;

export async function personOf({ db }: Services, email: string): Promise<Person> {
  const [row] = await db.select().from(users).where(eq(users.email, email));
  if (!row) throw new Error(`the demo has no ${email}`);
  return { id: row.id, role: row.role, email: row.email, name: row.name };
}

/** Somebody new with an account. */
export async function newPerson({ db }: Services, name: string, role: Role = 'customer'): Promise<Person> {
  const email = `${name.toLowerCase().replaceAll(' ', '.')}.${randomUUID().slice(0, 8)}@example.org`;
  const given = name.split(' ')[0];
  const [row] = await db.insert(users).values({ name, givenName: given, email, role }).returning();
  return { id: row!.id, role, email, name };
}

/** A visitor who is signed in as this person. */
export async function signedIn(services: Services, person: Person, url?: string): Promise<Visitor> {
  return new Visitor(url, await openSession(services, person.id));
}

/** The owner whose patterns these are, as a setting for the making of commissions; the customer is new. */
export async function settingOf(services: Services, customerName: string): Promise<Setting> {
  const owner = await personOf(services, 'wren.addlecombe@example.org');
  const maker = await personOf(services, 'juno.askerby@example.org');
  const bookkeeper = await personOf(services, 'nessa.holtwick@example.org');
  const [customer, other] = [await newPerson(services, customerName), await newPerson(services, 'Rowan Sedgeholm')];
  const drop = () => services.pool.end();
  return { services, clock: { now: new Date() }, owner, customer, other, maker, bookkeeper, drop };
}

/** A new commission of the setting's customer with revision 1 out; its ref. */
export async function quotedCommission(setting: Setting): Promise<string> {
  const { name, email } = setting.customer;
  const ref = await newEnquiry(setting, { clientId: randomUUID(), name, email });
  await sentQuote(setting, ref);
  return ref;
}

/** A new commission whose revision 1 is accepted; its ref, its row's id and the stage that is due. */
export async function agreedCommission(setting: Setting): Promise<{ ref: string; id: string; stage: string }> {
  const { services, customer } = setting;
  const ref = await quotedCommission(setting);
  const acceptance = { revision: 1, typedName: customer.name!, terms: true, bespoke: true, mark: true, adult: true };
  const accepted = await acceptQuote(services, customer, ref, acceptance, '192.0.2.7');
  if (!accepted.ok) throw new Error(accepted.problem.message);
  const { id } = await commission(setting, ref);
  const due = (await readBalance(services.db, id, new Date())).stages.find((stage) => stage.state === 'due');
  return { ref, id, stage: due!.id };
}
