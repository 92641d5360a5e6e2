import { execFileSync } from 'node:child_process';
import { cpSync, mkdtempSync, readFileSync, readdirSync, rmSync, symlinkSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { expect, it } from 'vitest';

interface Journal {
  entries: { idx: number; when: number; tag: string }[];
}

const journal = JSON.parse(readFileSync('drizzle/meta/_journal.json', 'utf8')) as Journal;

// Drizzle's migrator leaves out, without a word, a migration that is older than the last one applied.
it('lists every migration file once, each later than the one before', () => {
  const files = readdirSync('drizzle').filter((name) => name.endsWith('.sql'));
  expect(journal.entries.map(({ tag }) => `${tag}.sql`)).toEqual(files.sort());
  const times = journal.entries.map(({ when }) => when);
  expect(times).toEqual([...new Set(times)].sort((a, b) => a - b));
});

it('brings a database to exactly what the schema in the source says', () => {
  const folder = mkdtempSync(join(tmpdir(), 'pourwright-drizzle-'));
  try {
    cpSync('drizzle', join(folder, 'drizzle'), { recursive: true });
    cpSync('drizzle.config.ts', join(folder, 'drizzle.config.ts'));
    for (const shared of ['src', 'node_modules', 'package.json', 'tsconfig.json'])
      symlinkSync(resolve(shared), join(folder, shared));
    const output = execFileSync(
      process.execPath,
      ['node_modules/drizzle-kit/bin.cjs', 'generate', '--name', 'difference'],
      {
        cwd: folder,
        encoding: 'utf8',
      },
    );
    expect(output).toContain('No schema changes');
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
});
