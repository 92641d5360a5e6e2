import { eq } from 'drizzle-orm';
import type { Actor } from '../commission/permissions';
import type { Outcome } from '../commission/problem';
import type { CommissionRow } from '../server/commissions';
import type { Database, Transaction } from '../server/db/client';
import { commissions } from '../server/db/schema/commissions';
import { users } from '../server/db/schema/people';
import type { NewPhoto } from '../server/making/photos';
import type { Services } from '../server/services';
import type { Moment } from './clock';
import { demoPeople } from './people';

export type Person = NonNullable<Actor>;

/** A picture made before the seed's transaction begins, stored in its three sizes. */
export type StoredPicture = Pick<NewPhoto, 'sha256' | 'files'>;

/** What a story acts on: the real services inside the seed's transaction, at an instant of the past. */
export interface World {
  /** `db` is the seed's transaction; `now()` is the instant of the step at hand. */
  services: Services;
  person: (key: string) => Person;
  picture: (name: string) => StoredPicture;
  /** An id nobody used yet, such as a browser or a phone would make for its own entry. */
  newId: (what: string) => string;
}

/** One thing that happened, and when. */
export interface Step {
  at: Moment;
  run: (world: World) => Promise<void>;
}

/** A step of a story. */
export function step(at: Moment, run: Step['run']): Step {
  return { at, run };
}

/**
 * The services with the transaction for their database and a clock of their own. Server functions open their own
 * transactions inside it, which are savepoints, so that all of the demo is written or none of it.
 */
export function insideTransaction(services: Services, tx: Transaction, now: () => Date): Services {
  // A transaction does all that server functions ask of a database; only the pool behind it is not there.
  return { ...services, db: tx as unknown as Database, now };
}

/** Loads the people into a world. */
export async function openWorld(services: Services, pictures: ReadonlyMap<string, StoredPicture>): Promise<World> {
  const rows = await services.db.select().from(users);
  const people = new Map<string, Person>();
  for (const { key, email } of demoPeople) {
    const row = rows.find((user) => user.email === email);
    if (row) people.set(key, { id: row.id, role: row.role, email: row.email, name: row.name });
  }
  let entries = 0;
  return {
    services,
    person: (key) => found(people.get(key), `person ${key}`),
    picture: (name) => found(pictures.get(name), `picture ${name}`),
    newId: (what) => `demo-${what.toLowerCase()}-${String((entries += 1)).padStart(4, '0')}`,
  };
}

function found<T>(value: T | undefined, what: string): T {
  if (value === undefined) throw new Error(`The demo knows no ${what}.`);
  return value;
}

/** The value of what must go well; the demo's past has no refusals, so one is a fault of the demo. */
export function must<T>(outcome: Outcome<T>, what: string): T {
  if (outcome.ok) return outcome.value;
  throw new Error(`The demo could not go on at “${what}”: ${outcome.problem.message}`);
}

/** A commission's row by its shown number. */
export async function commissionOf({ services }: World, ref: string): Promise<CommissionRow> {
  const [row] = await services.db.select().from(commissions).where(eq(commissions.ref, ref));
  if (!row) throw new Error(`The demo has no commission ${ref} yet.`);
  return row;
}
