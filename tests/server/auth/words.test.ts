import { describe, expect, it } from 'vitest';
import { normaliseAddress } from '../../../src/server/auth/address';
import { guard, isCanonicalPath } from '../../../src/server/auth/guards';
import { isKnownBrowser, knownBrowserMark } from '../../../src/server/auth/known-browser';
import { safeNext } from '../../../src/server/auth/next-path';
import { newCode, seal, unseal } from '../../../src/server/auth/secrets';
import { countedAddress } from '../../../src/server/auth/visitor';
import { codeSchema } from '../../../src/server/people/sign-in-spend';

describe('an address', () => {
  it.each([
    [' Maud@Example.ORG ', 'maud@example.org'],
    // NFKC first, so that a look-alike at sign cannot hide a second address (GHSA-7rqj-j65f-68wh).
    ['maud＠example.org', 'maud@example.org'],
    ['o.hara+sword@mail.example.co.uk', 'o.hara+sword@mail.example.co.uk'],
  ])('%j is kept as %j', (typed, kept) => expect(normaliseAddress(typed)).toBe(kept));

  it.each([
    'a@b@example.org',
    'a＠b@example.org',
    'a@example.org,b@example.org',
    'a@example.org b@example.org',
    'Maud <a@example.org>',
    '"a b"@example.org',
    'a@example.org\nbcc: b@example.org',
    'a@localhost',
    'a@-example.org',
    'mаud@example.org',
    '@example.org',
    'a@',
    '',
    `${'a'.repeat(65)}@example.org`,
  ])('%j is refused', (typed) => expect(normaliseAddress(typed)).toBeNull());
});

describe('where to go after signing in', () => {
  it.each([
    ['/commissions/MF-0181?a=1#money', '/commissions/MF-0181?a=1#money'],
    ['', ''],
    [undefined, ''],
  ])('%j stays %j', (wanted, next) => expect(safeNext(wanted)).toBe(next));

  it.each([
    '//evil.example',
    '///evil.example',
    '/\\evil.example',
    '\\\\evil.example',
    'https://evil.example',
    'https:evil.example',
    'javascript:alert(1)',
    'evil.example',
    '/.//evil.example',
    '/x/..//evil.example',
    '/\t/evil.example',
    '/\n/evil.example',
    ' /commissions',
    '/api/sign-out',
    '/sign-out',
    `/${'a'.repeat(600)}`,
  ])('%j becomes the front page', (wanted) => expect(safeNext(wanted)).toBe('/'));
});

describe('the outer door', () => {
  const person = (role: 'customer' | 'maker' | 'owner' | 'bookkeeper') => ({
    id: '1',
    role,
    email: 'a@b.c',
    name: null,
  });

  it.each([
    ['/', 'open', 'open', 'open', 'open', 'open'],
    ['/price', 'open', 'open', 'open', 'open', 'open'],
    ['/api/uploads', 'open', 'open', 'open', 'open', 'open'],
    ['/commissions/[ref]', 'sign-in-needed', 'open', 'open', 'open', 'open'],
    ['/api/commissions/[ref]/accept', 'sign-in-needed', 'open', 'open', 'open', 'open'],
    ['/account', 'sign-in-needed', 'open', 'open', 'open', 'open'],
    ['/bench', 'sign-in-needed', 'not-allowed', 'open', 'open', 'not-allowed'],
    ['/api/bench/[piece]/stage', 'sign-in-needed', 'not-allowed', 'open', 'open', 'not-allowed'],
    ['/studio', 'sign-in-needed', 'not-allowed', 'not-allowed', 'open', 'not-allowed'],
    ['/studio/commissions/[ref]', 'sign-in-needed', 'not-allowed', 'not-allowed', 'open', 'not-allowed'],
    ['/studio/people', 'sign-in-needed', 'not-allowed', 'not-allowed', 'open', 'not-allowed'],
    ['/api/people/[id]/role', 'sign-in-needed', 'not-allowed', 'not-allowed', 'open', 'not-allowed'],
    ['/studio/money', 'sign-in-needed', 'not-allowed', 'not-allowed', 'open', 'open'],
    ['/studiously', 'open', 'open', 'open', 'open', 'open'],
  ])('%s: guest %s, customer %s, maker %s, owner %s, bookkeeper %s', (route, ...expected) => {
    const people = [null, person('customer'), person('maker'), person('owner'), person('bookkeeper')];
    expect(people.map((who) => guard(route, who))).toEqual(expected);
  });

  it.each([
    '//studio',
    '/\\studio',
    '/%2fstudio',
    '/studio%2Fpeople',
    '/studio%5cpeople',
    '/%252fstudio',
    '/%2e%2e/studio',
  ])('refuses the spelling %s', (path) => expect(isCanonicalPath(`http://localhost:4321${path}`)).toBe(false));

  it.each(['/', '/studio', '/sign-in?next=//x%2f', '/forms/leaf-shaped-sword#a//b', '/caf%C3%A9'])(
    'takes the spelling %s',
    (path) => expect(isCanonicalPath(`http://localhost:4321${path}`)).toBe(true),
  );
});

describe('small parts', () => {
  it('opens what it sealed, for the same request and secret only', () => {
    const sealed = seal('secret one', 'the token', 'request 1');
    expect(sealed).not.toContain('token');
    expect(unseal('secret one', sealed, 'request 1')).toBe('the token');
    expect(() => unseal('secret one', sealed, 'request 2')).toThrow();
    expect(() => unseal('secret two', sealed, 'request 1')).toThrow();
    expect(seal('secret one', 'the token', 'request 1')).not.toBe(sealed);
  });

  it('makes codes of six digits and takes them as people type them', () => {
    for (let time = 0; time < 500; time++) expect(newCode()).toMatch(/^\d{6}$/);
    const typed = codeSchema.parse({ email: 'a@example.org', code: ' 012 345 ' });
    expect(typed.code).toBe('012345');
    expect(codeSchema.safeParse({ email: 'a@example.org', code: '12345' }).success).toBe(false);
  });

  it('knows a browser by its mark, for one address only', () => {
    const mark = knownBrowserMark('secret', 'a@example.org');
    expect(isKnownBrowser('secret', 'a@example.org', mark)).toBe(true);
    expect(isKnownBrowser('secret', 'b@example.org', mark)).toBe(false);
    expect(isKnownBrowser('secret', 'a@example.org', undefined)).toBe(false);
  });

  // Documentation addresses of RFC 5737 and RFC 3849.
  it.each([
    ['192.0.2.7', '192.0.2.7'],
    ['::ffff:192.0.2.7', '192.0.2.7'],
    ['2001:db8:1:2:3:4:5:6', '2001:db8:1:2::/64'],
    ['2001:db8:1:2::9', '2001:db8:1:2::/64'],
    ['2001:DB8:0001:0002::', '2001:db8:1:2::/64'],
    ['::1', '0:0:0:0::/64'],
    ['fe80::1%eth0', 'fe80:0:0:0::/64'],
  ])('counts %s as %s', (address, counted) => expect(countedAddress(address)).toBe(counted));
});
