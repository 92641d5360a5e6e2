import { describe, expect, it } from 'vitest';
import { allowanceFor } from '../../src/launch/front/body-limit';
import { loggablePath } from '../../src/launch/front/request-log';
import { isCanonical } from '../../src/launch/front/request-rules';

describe('the spelling of an address', () => {
  // Spellings reported to pass path checks: GitHub pull requests withastro/astro 15717 and 15742, CVE-2025-64765,
  // CVE-2025-66202; dot segments by RFC 3986 section 5.2.4.
  it.each([
    '//studio',
    '/studio//rates',
    '/\\studio',
    '/%2fstudio',
    '/%2Fstudio',
    '/studio%5crates',
    '/%5Cstudio',
    '/./studio',
    '/x/../studio',
    '/..',
    '/%2e%2e/studio',
    '/%252fstudio',
    '/studio%00',
    '/price/sent?ref=%00',
    '/studio%0a',
    '/studio%zz',
    '/studio%c3%28',
    '/stu dio',
    'studio',
    'http://localhost/studio',
    '*',
    '',
  ])('%j is refused', (target) => {
    expect(isCanonical(target)).toBe(false);
  });

  it.each([
    '/',
    '/studio',
    '/studio/',
    '/forms/leaf-shaped-sword',
    '/.well-known/security.txt',
    '/c/K%C3%BCchen',
    '/sign-in?next=%2Fstudio%2F..%2F//x',
    '/_astro/Estimate.B1x_-2.js',
    '/a..b',
  ])('%j is taken', (target) => {
    expect(isCanonical(target)).toBe(true);
  });
});

describe('the size of a body', () => {
  it.each([
    ['/api/uploads', 205],
    ['/api/uploads/0190', 205],
    ['/api/bench/P-7/photos', 32],
    ['/api/photos', 32],
    ['/api/uploadsx', 1],
    ['/photos', 1],
    ['/api/stripe/webhook', 1],
  ])('%s may carry %i MB', (path, megabytes) => {
    expect(allowanceFor(path, 'multipart/form-data; boundary=b').bytes).toBe(megabytes * 1024 * 1024);
  });

  // What is no form with a file in it is read into memory.
  it.each(['application/x-www-form-urlencoded', 'application/json', 'text/plain', undefined])(
    'as %s may carry one megabyte everywhere',
    (type) => {
      for (const path of ['/api/uploads', '/api/bench/P-7/photos', '/api/commissions/MF-0181/files'])
        expect(allowanceFor(path, type).bytes).toBe(1024 * 1024);
    },
  );
});

describe('what the log keeps of an address', () => {
  it('drops the query and anything that could be a token', () => {
    expect(loggablePath('/sign-in?token=abc')).toBe('/sign-in');
    expect(loggablePath('/sign-in/dGhpcyBpcyBhIHRva2VuIG9mIHNvbWVvbmU')).toBe('/sign-in/…');
    expect(loggablePath('/api/uploads/0190a6b2-5a7e-7000-8000-000000000000')).toBe(
      '/api/uploads/0190a6b2-5a7e-7000-8000-000000000000',
    );
  });
});
