import { afterEach, expect, it, vi } from 'vitest';
import { nameCorner } from '../../src/components/frame/viewer';

afterEach(() => vi.unstubAllGlobals());

function linkAfter(answer: () => Promise<Response>) {
  vi.stubGlobal('fetch', answer);
  const link = document.createElement('a');
  link.href = '/commissions';
  link.textContent = 'My commissions';
  return nameCorner(link).then(() => [link.textContent, link.getAttribute('href')]);
}

it('turns the corner of a static page into the viewer’s own', async () => {
  const owner = { user: { name: 'Wren Addlecombe', role: 'owner' } };
  expect(await linkAfter(async () => Response.json(owner))).toEqual(['The studio', '/studio']);
  expect(await linkAfter(async () => Response.json({ user: null }))).toEqual(['Sign in', '/sign-in']);
});

it.each([
  ['no network', async () => Promise.reject(new TypeError('Failed to fetch'))],
  ['a server error', async () => Response.json({}, { status: 503 })],
  ['an answer that is not JSON', async () => new Response('<p>proxy</p>')],
  ['a role it does not know', async () => Response.json({ user: { role: 'visitor' } })],
])('leaves the link as it was built on %s', async (_, answer) => {
  expect(await linkAfter(answer)).toEqual(['My commissions', '/commissions']);
});
