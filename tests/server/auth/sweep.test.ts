import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { limit } from '../../../src/server/auth/limit';
import { openSession } from '../../../src/server/auth/session';
import { sessions, signInRequests, verificationTokens } from '../../../src/server/db/schema/people';
import type { Services } from '../../../src/server/services';
import { spendLink } from '../../../src/server/people/sign-in-spend';
import { sweepSignIns } from '../../../src/server/people/sign-in-sweep';
import { createTestServices } from '../../setup/database';
import { askAndRead, person, whoIs } from './mailed';

let services: Services;
let drop: () => Promise<void>;
beforeAll(async () => void ({ services, drop } = await createTestServices()));
afterAll(() => drop());

it('takes what has run out and leaves what is in use', async () => {
  const { db } = services;
  const id = await person(services, 'old@example.org', 'customer');
  await openSession(services, id);
  await askAndRead(services, 'old@example.org');
  await db.update(sessions).set({ expires: sql`now() - interval '1 second'` });
  await db.update(verificationTokens).set({ expires: sql`now() - interval '1 second'` });
  await db.update(signInRequests).set({ expiresAt: sql`now() - interval '25 hours'` });
  await db.execute(sql`update rate_limits set expire = 1`);
  const open = await openSession(services, id);
  const fresh = await askAndRead(services, 'fresh@example.org');
  await db.execute(sql`update rate_limits set expire = 1 where key not like 'link-client%'`);

  // One session, one token, one request, and the allowances of two addresses; the network's own was used since.
  expect(await sweepSignIns(services)).toBe(5);
  expect(await sweepSignIns(services)).toBe(0);
  expect(await whoIs(services, `${open.name}=${open.value}`)).toMatchObject({ id });
  expect((await spendLink(services, fresh)).ok).toBe(true);
  expect((await limit(services, 'link-client', 'another')).ok).toBe(true);
});
