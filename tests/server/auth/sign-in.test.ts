import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openSession } from '../../../src/server/auth/session';
import { sessions, signInRequests, users, verificationTokens } from '../../../src/server/db/schema/people';
import { mails } from '../../../src/server/db/schema/studio';
import type { Services } from '../../../src/server/services';
import { mailSignIn, requestSignIn } from '../../../src/server/people/sign-in';
import { readSignInLink, spendCode, spendLink } from '../../../src/server/people/sign-in-spend';
import { createTestServices } from '../../setup/database';
import { askAndRead, cookieOf, newestMail, person, VISITOR, whoIs } from './mailed';

let services: Services;
let drop: () => Promise<void>;
beforeAll(async () => void ({ services, drop } = await createTestServices()));
afterAll(() => drop());

/** Every row that a sign-in could touch, as one comparable text. */
async function everything(): Promise<string> {
  const tables = [users, sessions, signInRequests, verificationTokens, mails];
  const rows = await Promise.all(tables.map((table) => services.db.select().from(table)));
  return JSON.stringify(rows);
}

describe('a mailed link', () => {
  it('is shorter than 200 characters even at a long host', async () => {
    const publicUrl = 'https://commissions.a-rather-long-studio-name.example.org';
    const away = { ...services, config: { ...services.config, publicUrl } };
    const { link } = await askAndRead(away, 'long@example.org', '/commissions/MF-0181/quote/2?from=mail');
    expect(link.length).toBeLessThan(200);
    expect(link.startsWith(`${publicUrl}/sign-in/confirm?`)).toBe(true);
  });

  it('may be looked at any number of times: nothing changes', async () => {
    const mail = await askAndRead(services, 'looked@example.org');
    const before = await everything();
    for (let time = 0; time < 10; time++) {
      expect(await readSignInLink(services, mail)).toEqual({ email: 'looked@example.org' });
    }
    expect(await everything()).toBe(before);
  });

  it('signs in once and is politely refused the second time', async () => {
    const mail = await askAndRead(services, 'once@example.org', '/commissions/MF-0181');
    const first = await spendLink(services, mail);
    if (!first.ok) throw new Error(first.problem.message);
    expect(first.value.next).toBe('/commissions/MF-0181');
    expect(await whoIs(services, cookieOf(first.value))).toMatchObject({ email: 'once@example.org', role: 'customer' });
    const second = await spendLink(services, mail);
    expect(second).toMatchObject({ ok: false, problem: { code: 'stale' } });
    expect(second.ok ? '' : second.problem.message).toMatch(/used already/);
    expect(await readSignInLink(services, mail)).toBeNull();
  });

  it('gives one session to twenty presses at once', async () => {
    const mail = await askAndRead(services, 'twenty@example.org');
    const presses = await Promise.all(Array.from({ length: 20 }, () => spendLink(services, mail)));
    expect(presses.filter(({ ok }) => ok)).toHaveLength(1);
    const [user] = await services.db.select().from(users).where(eq(users.email, 'twenty@example.org'));
    expect(await services.db.select().from(sessions).where(eq(sessions.userId, user!.id))).toHaveLength(1);
  });

  it('makes one person of two links that are pressed at once', async () => {
    const mailed = [await askAndRead(services, 'two@example.org'), await askAndRead(services, 'two@example.org')];
    const presses = await Promise.all(mailed.map((mail) => spendLink(services, mail)));
    expect(presses.map(({ ok }) => ok)).toEqual([true, true]);
    expect(await services.db.select().from(users).where(eq(users.email, 'two@example.org'))).toHaveLength(1);
  });

  it('is not used up by somebody who has its number but not its token', async () => {
    const mail = await askAndRead(services, 'guessed@example.org');
    const other = await askAndRead(services, 'guesser@example.org');
    const tried = await spendLink(services, { request: mail.request, token: other.token });
    expect(tried).toMatchObject({ ok: false, problem: { code: 'stale' } });
    expect((await spendLink(services, mail)).ok).toBe(true);
    expect((await spendLink(services, other)).ok).toBe(true);
  });

  it('ends after ten minutes by the clock of the database, whatever this machine’s says', async () => {
    const ahead = { ...services, now: () => new Date(Date.now() + 3_600_000) };
    const mail = await askAndRead(ahead, 'late@example.org');
    const [row] = await services.db
      .select({ minutes: sql<number>`extract(epoch from expires_at - created_at)::int / 60` })
      .from(signInRequests)
      .where(eq(signInRequests.id, mail.request));
    expect(row!.minutes).toBe(10);
    const passed = { expiresAt: sql`now() - interval '1 second'` };
    await services.db.update(signInRequests).set(passed).where(eq(signInRequests.id, mail.request));
    expect(await readSignInLink(services, mail)).toBeNull();
    expect((await spendLink(services, mail)).ok).toBe(false);
    expect((await spendCode(services, VISITOR, { email: 'late@example.org', code: mail.code })).ok).toBe(false);
  });

  it('is refused when only the token that Auth.js keeps is too old', async () => {
    const mail = await askAndRead(services, 'token@example.org');
    await services.db
      .update(verificationTokens)
      .set({ expires: sql`now() - interval '1 second'` })
      .where(eq(verificationTokens.identifier, 'token@example.org'));
    expect(await spendLink(services, mail)).toMatchObject({ ok: false, problem: { code: 'stale' } });
  });

  it('opens a new session and ends the one the browser held', async () => {
    const id = await person(services, 'again@example.org', 'customer');
    const old = await openSession(services, id);
    const mail = await askAndRead(services, 'again@example.org');
    const signedIn = await spendLink(services, mail, old.value);
    if (!signedIn.ok) throw new Error(signedIn.problem.message);
    expect(cookieOf(signedIn.value)).not.toContain(old.value);
    expect(await whoIs(services, `${old.name}=${old.value}`)).toBeNull();
    expect(await whoIs(services, cookieOf(signedIn.value))).toMatchObject({ id });
  });
});

describe('asking for a link', () => {
  it('answers and does the same for a known and an unknown address', async () => {
    await person(services, 'known@example.org', 'owner');
    const traces = [];
    for (const email of ['known@example.org', 'unknown@example.org']) {
      const answer = await requestSignIn(services, VISITOR, { email, next: '' });
      const [mail] = await services.db.select().from(mails).where(eq(mails.to, email));
      const requests = await services.db.select().from(signInRequests).where(eq(signInRequests.email, email));
      const tokens = await services.db
        .select()
        .from(verificationTokens)
        .where(eq(verificationTokens.identifier, email));
      traces.push({
        answer,
        letter: mail!.letter,
        keys: Object.keys(mail!.data),
        rows: [requests.length, tokens.length],
      });
    }
    expect(traces[0]).toEqual(traces[1]);
    expect(traces[0]).toEqual({
      answer: { ok: true, value: { minutes: 10 } },
      letter: 'M0',
      keys: ['code', 'link', 'minutes'],
      rows: [1, 1],
    });
    expect(await services.db.select().from(users).where(eq(users.email, 'unknown@example.org'))).toEqual([]);
  });

  it('keeps neither token nor code in clear outside the mail', async () => {
    const mail = await askAndRead(services, 'clear@example.org');
    const kept = JSON.stringify([
      await services.db.select().from(signInRequests).where(eq(signInRequests.email, 'clear@example.org')),
      await services.db.select().from(verificationTokens),
    ]);
    expect(kept).not.toContain(mail.token);
    expect(kept).not.toContain(`"${mail.code}"`);
  });

  it('leaves nothing behind when what it belongs to is undone', async () => {
    const undone = services.db.transaction(async (tx) => {
      await mailSignIn(tx, services, { email: 'undone@example.org', next: '' });
      throw new Error('undone');
    });
    await expect(undone).rejects.toThrow('undone');
    expect(await services.db.select().from(mails).where(eq(mails.to, 'undone@example.org'))).toEqual([]);
  });
});

describe('a code', () => {
  it('signs in on a device that never saw the mail, and spends the link with it', async () => {
    const mail = await askAndRead(services, 'phone@example.org', '/commissions');
    const elsewhere = { client: '198.51.100.9' };
    const signedIn = await spendCode(services, elsewhere, { email: 'phone@example.org', code: mail.code });
    if (!signedIn.ok) throw new Error(signedIn.problem.message);
    expect(await whoIs(services, cookieOf(signedIn.value))).toMatchObject({ email: 'phone@example.org' });
    expect((await spendCode(services, elsewhere, { email: 'phone@example.org', code: mail.code })).ok).toBe(false);
    expect((await spendLink(services, mail)).ok).toBe(false);
  });

  it('is dead after five wrong tries, and the link still works', async () => {
    const mail = await askAndRead(services, 'five@example.org');
    const wrong = mail.code === '111111' ? '222222' : '111111';
    for (let time = 0; time < 5; time++) {
      const tried = await spendCode(services, VISITOR, { email: 'five@example.org', code: wrong });
      expect(tried).toMatchObject({ ok: false, problem: { code: 'invalid', fields: { code: expect.any(String) } } });
    }
    expect((await spendCode(services, VISITOR, { email: 'five@example.org', code: mail.code })).ok).toBe(false);
    expect((await spendLink(services, mail)).ok).toBe(true);
  });

  it('works only for its own address, and says the same for one that never asked', async () => {
    const mail = await askAndRead(services, 'mine@example.org');
    await askAndRead(services, 'yours@example.org');
    const other = await spendCode(services, VISITOR, { email: 'yours@example.org', code: mail.code });
    const never = await spendCode(services, VISITOR, { email: 'never@example.org', code: mail.code });
    expect(other).toEqual(never);
    expect(other.ok).toBe(false);
  });

  it('of an earlier mail still works after a later one', async () => {
    const first = await askAndRead(services, 'both@example.org');
    await askAndRead(services, 'both@example.org');
    expect((await spendCode(services, VISITOR, { email: 'both@example.org', code: first.code })).ok).toBe(true);
    const second = await newestMail(services, 'both@example.org');
    expect((await spendCode(services, VISITOR, { email: 'both@example.org', code: second.code })).ok).toBe(true);
  });
});
