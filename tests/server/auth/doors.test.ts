import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { GET as authGet, POST as authPost } from '../../../src/pages/api/auth/[...auth]';
import { GET as me } from '../../../src/pages/api/me';
import { POST as askForLink } from '../../../src/pages/api/sign-in/index';
import { POST as typeCode } from '../../../src/pages/api/sign-in/code';
import { POST as pressButton } from '../../../src/pages/api/sign-in/spend';
import { POST as signOut } from '../../../src/pages/api/sign-out/index';
import { hashMailedToken } from '../../../src/server/auth/secrets';
import { sessionCookieName } from '../../../src/server/auth/session';
import { verificationTokens } from '../../../src/server/db/schema/people';
import type { Services } from '../../../src/server/services';
import { createTestServices } from '../../setup/database';
import { Browser } from './knock';
import { askAndRead, newestMail, person } from './mailed';

// The package's source needs Astro's build; whatever reaches it from here has passed our own refusal.
const reached = vi.hoisted(() => ({ times: 0 }));
vi.mock('auth-astro/server', () => ({
  AstroAuth: () => {
    const handler = () => {
      reached.times += 1;
      return new Response('auth-astro answers');
    };
    return { GET: handler, POST: handler };
  },
}));

let services: Services;
let drop: () => Promise<void>;
beforeAll(async () => void ({ services, drop } = await createTestServices()));
afterAll(() => drop());

describe('the sign-in doors', () => {
  it('lead a person from the form through the mail to where they were going', async () => {
    const browser = new Browser(services);
    const asked = await browser.post(askForLink, { email: ' Form@Example.org', next: '/commissions/MF-0181' });
    expect([asked.status, asked.headers.get('location')]).toEqual([303, '/sign-in/code']);
    const { request, token } = await newestMail(services, 'form@example.org');
    const pressed = await browser.post(pressButton, { request, token });
    expect([pressed.status, pressed.headers.get('location')]).toEqual([303, '/commissions/MF-0181']);
    expect(await (await browser.get(me)).json()).toEqual({ user: { name: null, role: 'customer' } });
  });

  it('give a second browser the same by its code', async () => {
    await new Browser(services).post(askForLink, { email: 'desk@example.org' });
    const { code } = await newestMail(services, 'desk@example.org');
    const phone = new Browser(services, '198.51.100.3');
    const typed = await phone.post(typeCode, { email: 'desk@example.org', code });
    expect([typed.status, typed.headers.get('location')]).toEqual([303, '/commissions']);
    expect(await (await phone.get(me)).json()).toMatchObject({ user: { role: 'customer' } });
  });

  it('lead a wrong code back to the page it was typed on, with what was typed', async () => {
    const browser = new Browser(services);
    const typed = { email: 'wrong@example.org', code: 'abc' };
    const fromEnquiry = await browser.post(typeCode, { ...typed, enquiry: 'MF-0188' });
    expect(fromEnquiry.headers.get('location')).toMatch(/^\/price\/sent\?ref=MF-0188&again=/);
    const bare = await browser.post(typeCode, typed);
    expect(bare.headers.get('location')).toMatch(/^\/sign-in\/code\?again=/);
    const elsewhere = await browser.post(typeCode, { ...typed, enquiry: '//evil.example' });
    expect(elsewhere.headers.get('location')).toMatch(/^\/sign-in\/code\?again=/);
  });

  it('never put the session in a body', async () => {
    const browser = new Browser(services);
    const mail = await askAndRead(services, 'body@example.org');
    const pressed = await browser.post(pressButton, { request: mail.request, token: mail.token }, { json: true });
    const session = browser.cookies.get(sessionCookieName(services.config))!;
    const text = await pressed.text();
    expect(JSON.parse(text)).toEqual({ ok: true, value: { next: '/commissions' }, to: '/commissions' });
    expect(text).not.toContain(session);
  });

  it('keep a spent link’s refusal for the page, and a bad address with what was typed', async () => {
    const browser = new Browser(services);
    const mail = await askAndRead(services, 'refused@example.org');
    await browser.post(pressButton, { request: mail.request, token: mail.token });
    const again = await browser.post(pressButton, { request: mail.request, token: mail.token });
    expect(again.headers.get('location')).toMatch(/^\/sign-in\?again=/);
    const bad = await browser.post(askForLink, { email: 'no address' }, { json: true });
    expect(bad.status).toBe(422);
    expect(await bad.json()).toMatchObject({
      problem: { fields: { email: expect.stringContaining('name@example.org') } },
    });
  });

  it.each(['//evil.example', 'https://evil.example/', '/\\evil.example', 'https:evil.example'])(
    'land on the front page when told to go to %s',
    async (next) => {
      const browser = new Browser(services);
      const email = `to-${Buffer.from(next).toString('hex')}@example.org`;
      await browser.post(askForLink, { email, next });
      const { request, token } = await newestMail(services, email);
      expect((await browser.post(pressButton, { request, token })).headers.get('location')).toBe('/');
    },
  );

  it.each([
    ['owner', '/studio'],
    ['maker', '/bench'],
    ['bookkeeper', '/studio/money'],
  ] as const)('lead a %s who was going nowhere to %s', async (role, home) => {
    await person(services, `${role}@example.org`, role);
    const { request, token } = await askAndRead(services, `${role}@example.org`);
    const pressed = await new Browser(services).post(pressButton, { request, token });
    expect(pressed.headers.get('location')).toBe(home);
  });

  it('refuse a press that another site sends', async () => {
    const { request, token } = await askAndRead(services, 'cross@example.org');
    const browser = new Browser(services);
    const headers = { origin: 'https://evil.example' };
    const pressed = await browser.post(pressButton, { request, token }, { json: true, headers });
    expect(pressed.status).toBe(403);
    expect(browser.cookies.size).toBe(0);
    expect((await browser.post(pressButton, { request, token })).headers.get('location')).toBe('/commissions');
  });

  it('end the session at sign-out, on the server as well', async () => {
    const { request, token } = await askAndRead(services, 'leaves@example.org');
    const browser = new Browser(services);
    await browser.post(pressButton, { request, token });
    const kept = browser.cookies.get(sessionCookieName(services.config))!;
    expect((await browser.post(signOut, {})).headers.get('location')).toBe('/');
    expect(browser.cookies.has(sessionCookieName(services.config))).toBe(false);
    browser.cookies.set(sessionCookieName(services.config), kept);
    expect(await (await browser.get(me)).json()).toEqual({ user: null });
  });
});

describe('limits', () => {
  it('hold for one address, whatever X-Forwarded-For says and wherever the visitor is', async () => {
    const statuses = [];
    for (let time = 1; time <= 7; time++) {
      const headers = { 'x-forwarded-for': `203.0.113.${time}` };
      const browser = new Browser(services, `192.0.2.${100 + time}`);
      statuses.push((await browser.post(askForLink, { email: 'asked@example.org' }, { json: true, headers })).status);
    }
    expect(statuses).toEqual([200, 200, 200, 200, 200, 429, 429]);
  });

  it('leave the address’s own browser an allowance when strangers have used theirs up', async () => {
    const browser = new Browser(services, '192.0.2.50');
    const { request, token } = await askAndRead(services, 'target@example.org');
    await browser.post(pressButton, { request, token });
    await browser.post(signOut, {});
    const stranger = new Browser(services, '198.51.100.66');
    let refused: Response | undefined;
    for (let time = 0; time < 6; time++) {
      refused = await stranger.post(askForLink, { email: 'target@example.org' }, { json: true });
    }
    expect(refused!.status).toBe(429);
    expect(await refused!.json()).toMatchObject({
      problem: { code: 'too-many', message: expect.stringMatching(/Try again in \d+ minutes/) },
    });
    expect((await browser.post(askForLink, { email: 'target@example.org' }, { json: true })).status).toBe(200);
    const newest = await newestMail(services, 'target@example.org');
    const pressed = await browser.post(pressButton, { request: newest.request, token: newest.token });
    expect(pressed.headers.get('location')).toBe('/commissions');
  });

  it('hold for one network address over many mail addresses', async () => {
    const from = '203.0.113.200';
    const statuses = [];
    for (let time = 0; time < 62; time++) {
      const headers = { 'x-forwarded-for': `10.0.0.${time}` };
      const email = `many-${time}@example.org`;
      statuses.push((await new Browser(services, from).post(askForLink, { email }, { json: true, headers })).status);
    }
    expect(statuses.slice(0, 60).every((status) => status === 200)).toBe(true);
    expect(statuses.slice(60)).toEqual([429, 429]);
  });

  it('stop the guessing of codes, and leave the link', async () => {
    const mail = await askAndRead(services, 'guess@example.org');
    const wrong = mail.code === '000000' ? '000001' : '000000';
    const statuses = [];
    for (let time = 0; time < 21; time++) {
      const browser = new Browser(services, `198.18.${time}.1`);
      statuses.push((await browser.post(typeCode, { email: 'guess@example.org', code: wrong }, { json: true })).status);
    }
    expect(statuses.slice(0, 20).every((status) => status === 422)).toBe(true);
    expect(statuses[20]).toBe(429);
    const pressed = await new Browser(services).post(pressButton, { request: mail.request, token: mail.token });
    expect(pressed.headers.get('location')).toBe('/commissions');
  });

  it('keep no address in clear', async () => {
    const { rows } = await services.db.execute<{ key: string }>(sql`select key from rate_limits`);
    expect(rows.length).toBeGreaterThan(0);
    expect(rows.filter(({ key }) => key.includes('example.org') || key.includes('192.0.2'))).toEqual([]);
  });
});

describe('the public face of Auth.js', () => {
  it('spends no token by a GET, and sends no mail', async () => {
    const { token } = await askAndRead(services, 'scanned@example.org');
    const browser = new Browser(services);
    const paths = [
      'callback/mail',
      'callback',
      'signin',
      'signin/mail',
      'signout',
      'verify-request',
      'providers',
      'error',
    ];
    for (const auth of paths) {
      const path = `/api/auth/${auth}?token=${token}&email=scanned@example.org`;
      expect((await browser.get(authGet, { path, params: { auth } })).status).toBe(404);
      if (auth !== 'signout') {
        expect((await browser.post(authPost, { email: 'a@example.org' }, { path, params: { auth } })).status).toBe(404);
      }
    }
    expect(reached.times).toBe(0);
    const rows = await services.db.select().from(verificationTokens);
    expect(rows.map((row) => row.token)).toContain(hashMailedToken(services.config.authSecret, token));
  });

  it('answers who is signed in', async () => {
    const browser = new Browser(services);
    const answer = await browser.get(authGet, { path: '/api/auth/session', params: { auth: 'session' } });
    expect(answer.status).toBe(200);
    expect(reached.times).toBe(1);
  });
});
