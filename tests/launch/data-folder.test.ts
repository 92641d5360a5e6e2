import { mkdtempSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { claimDataFolder } from '../../src/launch/data-folder';

let parent: string;
beforeAll(() => {
  parent = mkdtempSync(join(tmpdir(), 'pourwright-data-'));
});
afterAll(() => rmSync(parent, { recursive: true, force: true }));

const rights = (path: string) => (statSync(path).mode & 0o777).toString(8);

it('keeps what customers send from other accounts, and lets the database in', () => {
  const folder = join(parent, 'data');
  const giveBack = claimDataFolder(folder);
  expect([rights(folder), rights(join(folder, 'uploads'))]).toEqual(['755', '700']);
  giveBack();
});
