import { asc, ne } from 'drizzle-orm';
import type { Config } from '../server/config';
import { users } from '../server/db/schema/people';
import { closeServices, createServices } from '../server/services';

/** What a person reads once the studio is ready: where it is, and in the demo who can sign in and where mails arrive. */
export async function welcome(config: Config): Promise<string[]> {
  const ready = `Pourwright is ready: ${config.publicUrl}`;
  if (!config.demo) return ['', ready];
  const people = await demoPeople(config);
  const width = Math.max(...people.map(({ name }) => name.length));
  return [
    '',
    ready,
    '',
    'Sign in as any of these; the link and the code arrive in the inbox.',
    ...people.map(({ name, role, email }) => `  ${name.padEnd(width)}  ${role.padEnd(10)}  ${email}`),
    '',
    `  Inbox     http://localhost:${config.port + 2}`,
    `  Pay page  http://localhost:${config.port + 1}`,
    '',
    'Stop with Ctrl-C.',
  ];
}

async function demoPeople(config: Config): Promise<{ name: string; role: string; email: string }[]> {
  const services = createServices(config);
  try {
    const staff = await services.db.select().from(users).where(ne(users.role, 'customer')).orderBy(asc(users.role));
    const customers = await services.db.query.users.findMany({
      where: (user, { eq }) => eq(user.role, 'customer'),
      limit: 4,
    });
    return [...staff, ...customers].map(({ name, role, email }) => ({ name: name ?? email, role, email }));
  } finally {
    await closeServices(services);
  }
}
