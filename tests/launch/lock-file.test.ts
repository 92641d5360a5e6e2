import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';

interface Locked {
  version?: string;
}

const lock = JSON.parse(readFileSync('package-lock.json', 'utf8')) as { packages: Record<string, Locked> };

// The lowest versions without the advisories known for them, as their GitHub advisories state (GHSA-26w7-cxv4-gfx2 and
// GHSA-rgj7-g3m4-5g8c for sharp, GHSA-7rqj-j65f-68wh for @auth/core, CVE-2026-39356 for drizzle-orm); the rest are the
// versions this program was proven with.
const MINIMUM = {
  astro: '5.18.2',
  '@astrojs/node': '9.5.5',
  '@auth/core': '0.41.3',
  sharp: '0.35.5',
  'drizzle-orm': '0.45.4',
  stripe: '23.1.0',
  resend: '6.38.0',
  pg: '8.23.1',
};

function isAtLeast(version: string, minimum: string): boolean {
  const [have, need] = [version, minimum].map((text) => text.split('.').map(Number));
  const at = need!.findIndex((part, index) => have![index] !== part);
  return at < 0 || have![at]! > need![at]!;
}

it.each(Object.entries(MINIMUM))('every copy of %s is at least %s', (name, minimum) => {
  const copies = Object.entries(lock.packages).filter(([path]) => path.endsWith(`node_modules/${name}`));
  expect(copies.length).toBeGreaterThan(0);
  for (const [path, { version = '0' }] of copies) {
    expect(isAtLeast(version, minimum), `${path} is ${version}`).toBe(true);
  }
});

it('pins every direct package to one exact version', () => {
  const manifest = JSON.parse(readFileSync('package.json', 'utf8')) as Record<string, Record<string, string>>;
  const ranges = Object.entries({ ...manifest.dependencies, ...manifest.devDependencies });
  expect(ranges.filter(([, range]) => !/^\d+\.\d+\.\d+$/.test(range))).toEqual([]);
});
