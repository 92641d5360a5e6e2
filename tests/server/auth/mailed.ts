import { desc, eq } from 'drizzle-orm';
import type { Role } from '../../../src/commission/permissions';
import { readSession } from '../../../src/server/auth/session';
import { mails } from '../../../src/server/db/schema/studio';
import { users } from '../../../src/server/db/schema/people';
import type { Services } from '../../../src/server/services';
import { requestSignIn, signInSchema } from '../../../src/server/people/sign-in';
import type { SignedIn } from '../../../src/server/people/sign-in-spend';

/** A visitor at a documentation address (RFC 5737). */
export const VISITOR = { client: '192.0.2.7' };

/** What a sign-in mail brought. */
export interface Mailed {
  link: string;
  request: string;
  token: string;
  code: string;
}

/** Asks for a sign-in as the form does and reads the mail from the outbox. */
export async function askAndRead(services: Services, email: string, next?: string): Promise<Mailed> {
  const asked = await requestSignIn(services, VISITOR, signInSchema.parse({ email, next }));
  if (!asked.ok) throw new Error(asked.problem.message);
  return newestMail(services, email);
}

export async function newestMail(services: Services, email: string): Promise<Mailed> {
  const [row] = await services.db.select().from(mails).where(eq(mails.to, email)).orderBy(desc(mails.id)).limit(1);
  const { link, code } = row!.data as { link: string; code: string };
  const query = new URL(link).searchParams;
  return { link, code, request: query.get('request')!, token: query.get('token')! };
}

/** Makes a person who has signed in before. */
export async function person(services: Services, email: string, role: Role, name = 'Somebody Here'): Promise<string> {
  const [row] = await services.db.insert(users).values({ email, role, name }).returning({ id: users.id });
  return row!.id;
}

/** The Cookie header a browser would send after this sign-in. */
export function cookieOf(signedIn: Pick<SignedIn, 'cookies'>): string {
  return signedIn.cookies.map(({ name, value }) => `${name}=${value}`).join('; ');
}

/** Who a Cookie header belongs to. */
export async function whoIs(services: Services, cookie: string) {
  return (await readSession(services, cookie)).user;
}
