import { readdir, stat, unlink } from 'node:fs/promises';
import { join } from 'node:path';

const AREAS = ['arriving', 'uploads', 'photos'] as const;
/** Nothing takes a day to arrive, nor to get its row. */
const STRAY_AFTER_MS = 24 * 60 * 60_000;

/**
 * Deletes files that belong to no row and are older than a day: what a process left that was killed between a file and
 * its row. `used` tells which of these keys some row names. Returns how many files went.
 */
export async function sweepStrays(
  folder: string,
  now: Date,
  used: (keys: string[]) => Promise<ReadonlySet<string>>,
): Promise<number> {
  let swept = 0;
  for (const area of AREAS) {
    for (const shelf of await namesIn(join(folder, area))) {
      const keys = (await namesIn(join(folder, area, shelf))).map((name) => `${area}/${shelf}/${name}`);
      const old = await olderThan(folder, keys, now.getTime() - STRAY_AFTER_MS);
      if (old.length === 0) continue;
      const kept = area === 'arriving' ? new Set<string>() : await used(old);
      for (const key of old.filter((each) => !kept.has(each))) {
        await unlink(join(folder, key));
        swept += 1;
      }
    }
  }
  return swept;
}

async function namesIn(path: string): Promise<string[]> {
  try {
    return await readdir(path);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return [];
    throw error;
  }
}

async function olderThan(folder: string, keys: string[], limit: number): Promise<string[]> {
  const old: string[] = [];
  for (const key of keys) if ((await stat(join(folder, key))).mtimeMs < limit) old.push(key);
  return old;
}
