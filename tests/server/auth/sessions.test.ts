import { Auth } from '@auth/core';
import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { readAccount, signOutEverywhere, updateAccount } from '../../../src/server/people/account';
import { authConfig, authRequest } from '../../../src/server/auth/auth-config';
import { endSessions, openSession, readSession } from '../../../src/server/auth/session';
import { sessions, users } from '../../../src/server/db/schema/people';
import { changeRole, setActive } from '../../../src/server/people/people';
import type { Services } from '../../../src/server/services';
import { createTestServices } from '../../setup/database';
import { person, whoIs } from './mailed';

let services: Services;
let drop: () => Promise<void>;
let owner: { id: string; role: 'owner'; email: string; name: string };
beforeAll(async () => {
  ({ services, drop } = await createTestServices());
  const id = await person(services, 'wren@example.org', 'owner', 'Wren Addlecombe');
  owner = { id, role: 'owner', email: 'wren@example.org', name: 'Wren Addlecombe' };
});
afterAll(() => drop());

/** Signs a new person in on two devices; gives their Cookie headers. */
async function onTwoDevices(email: string, role: 'maker' | 'customer') {
  const id = await person(services, email, role);
  const opened = [await openSession(services, id), await openSession(services, id)];
  const [desk, phone] = opened.map(({ name, value }) => `${name}=${value}`) as [string, string];
  return { id, desk, phone, tokens: opened.map(({ value }) => value) };
}

it('tells who is signed in and never the token, which the table does not hold either', async () => {
  const { id, desk, tokens } = await onTwoDevices('json@example.org', 'maker');
  const settings = authConfig(services.config, services.db, { onError: (error) => expect.unreachable(error.message) });
  const response = await Auth(authRequest(services.config.publicUrl, '/session', desk), settings);
  const text = await response.text();
  expect(JSON.parse(text)).toEqual({
    expires: expect.any(String),
    user: { id, role: 'maker', name: 'Somebody Here', email: 'json@example.org' },
  });
  const kept = JSON.stringify(await services.db.select().from(sessions));
  for (const token of tokens) expect(`${text} ${kept}`).not.toContain(token);
});

it('ends all of a person’s sessions when their role changes', async () => {
  const { id, desk, phone } = await onTwoDevices('role@example.org', 'maker');
  expect(await whoIs(services, desk)).toMatchObject({ role: 'maker' });
  expect((await changeRole(services, owner, id, { role: 'bookkeeper' })).ok).toBe(true);
  expect([await whoIs(services, desk), await whoIs(services, phone)]).toEqual([null, null]);
});

it('ends them when somebody may not sign in any more, and lets no session of theirs live', async () => {
  const { id, desk } = await onTwoDevices('gone@example.org', 'maker');
  expect((await setActive(services, owner, id, { active: false })).ok).toBe(true);
  expect(await whoIs(services, desk)).toBeNull();
  const { name, value } = await openSession(services, id);
  expect(await whoIs(services, `${name}=${value}`)).toBeNull();
});

it('signs out everywhere', async () => {
  const { id, desk, phone } = await onTwoDevices('everywhere@example.org', 'customer');
  const actor = { id, role: 'customer' as const, email: 'everywhere@example.org', name: null };
  expect(await readAccount(services, actor)).toMatchObject({ ok: true, value: { sessions: 2 } });
  await signOutEverywhere(services, actor);
  expect([await whoIs(services, desk), await whoIs(services, phone)]).toEqual([null, null]);
});

it('can spare the session that asks', async () => {
  const { id, desk, phone, tokens } = await onTwoDevices('spared@example.org', 'customer');
  await endSessions(services.db, id, tokens[0]);
  expect(await whoIs(services, desk)).toMatchObject({ id });
  expect(await whoIs(services, phone)).toBeNull();
});

it('moves the end of a session onward while it is used, in the table and in the cookie', async () => {
  const { id, desk } = await onTwoDevices('rolling@example.org', 'customer');
  await services.db
    .update(sessions)
    .set({ expires: sql`now() + interval '3 days'` })
    .where(eq(sessions.userId, id));
  const { cookies } = await readSession(services, desk);
  const inDays = (date: Date) => (date.getTime() - Date.now()) / 86_400_000;
  expect(inDays(cookies[0]!.options.expires!)).toBeGreaterThan(29);
  expect(cookies[0]!.options).toMatchObject({ httpOnly: true, sameSite: 'lax', path: '/', secure: false });
  const rows = await services.db.select().from(sessions).where(eq(sessions.userId, id));
  expect(Math.max(...rows.map((row) => inDays(row.expires)))).toBeGreaterThan(29);
});

it('takes a dead cookie off the browser', async () => {
  const { id, desk } = await onTwoDevices('dead@example.org', 'customer');
  await services.db
    .update(sessions)
    .set({ expires: sql`now() - interval '1 second'` })
    .where(eq(sessions.userId, id));
  const { user, cookies } = await readSession(services, desk);
  expect(user).toBeNull();
  expect(cookies[0]).toMatchObject({ value: '', options: { maxAge: 0 } });
});

it('asks browsers to send the cookie over https only, where the studio has https', async () => {
  const away = { ...services, config: { ...services.config, publicUrl: 'https://studio.example' } };
  const id = await person(services, 'tls@example.org', 'customer');
  const { name, value } = await openSession(away, id);
  expect(name).toBe('__Secure-authjs.session-token');
  const { user, cookies } = await readSession(away, `${name}=${value}`);
  expect(user).toMatchObject({ id });
  expect(cookies[0]!.options.secure).toBe(true);
  expect((await readSession(services, `${name}=${value}`)).user).toBeNull();
});

it('says that the database is away rather than that nobody is signed in', async () => {
  const broken = services.db.transaction(async (tx) => {
    await tx.execute(sql`set local statement_timeout = 1`);
    await tx.execute(sql`select pg_sleep(1)`).catch(() => undefined);
    return readSession({ config: services.config, db: tx as never }, 'authjs.session-token=whatever');
  });
  await expect(broken).rejects.toThrow();
});

it('lets a person change their own name and telephone, and nobody’s else', async () => {
  const { id } = await onTwoDevices('named@example.org', 'customer');
  const actor = { id, role: 'customer' as const, email: 'named@example.org', name: null };
  await updateAccount(services, actor, { name: 'Maud Evershade', givenName: '', phone: '+44 20 7946 0000' });
  const [row] = await services.db.select().from(users).where(eq(users.id, id));
  expect(row).toMatchObject({ name: 'Maud Evershade', givenName: 'Maud', phone: '+44 20 7946 0000' });
  expect(await updateAccount(services, null, { name: 'X', givenName: '', phone: '' })).toMatchObject({
    ok: false,
    problem: { code: 'sign-in-needed' },
  });
});
