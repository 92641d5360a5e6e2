import { and, eq } from 'drizzle-orm';
import type { Db } from '../db/client';
import { users } from '../db/schema/people';

/** Addresses and names of the studio's owners, who get the studio's own copies of letters. */
export async function ownerAddresses(db: Db): Promise<{ email: string; name: string }[]> {
  const rows = await db
    .select({ email: users.email, name: users.name })
    .from(users)
    .where(and(eq(users.role, 'owner'), eq(users.active, true)));
  return rows.map((row) => ({ email: row.email, name: row.name ?? row.email }));
}
