import { and, desc, eq } from 'drizzle-orm';
import type { Db } from '../db/client';
import { events } from '../db/schema/commissions';
import { users } from '../db/schema/people';

/** One line of history. `who` is a first name or a role, never an address. */
export interface HistoryLine {
  id: number;
  at: Date;
  code: string;
  who: string;
  sentence: string;
  public: boolean;
}

const ROLE_WORDS: Record<string, string> = {
  customer: 'Customer',
  owner: 'Studio',
  maker: 'Studio',
  bookkeeper: 'Studio',
  clock: 'The clock',
  payment: 'Payments',
  courier: 'Carrier',
  guest: 'Guest',
};

/** The history of a commission, the newest first; customers get the lines that are theirs to read. */
export async function readHistory(
  db: Db,
  commissionId: string,
  readers: 'studio' | 'customer',
): Promise<HistoryLine[]> {
  const rows = await db
    .select({ event: events, givenName: users.givenName })
    .from(events)
    .leftJoin(users, eq(users.id, events.actorId))
    .where(and(eq(events.commissionId, commissionId), readers === 'customer' ? eq(events.public, true) : undefined))
    .orderBy(desc(events.id));
  return rows.map(({ event, givenName }) => ({
    id: event.id,
    at: event.at,
    code: event.code,
    who: whoActed(event.actorRole, givenName, readers),
    sentence: event.sentence,
    public: event.public,
  }));
}

function whoActed(role: string, givenName: string | null, readers: 'studio' | 'customer'): string {
  if (role === 'customer' && readers === 'customer') return 'you';
  return (role !== 'customer' && givenName) || (ROLE_WORDS[role] ?? role);
}
