import { chmodSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

/** A data folder that the database's own account can reach, not yet made, and a function that removes it. */
export function temporaryDataFolder(): { folder: string; remove: () => void } {
  const parent = mkdtempSync(join(tmpdir(), 'pourwright-test-'));
  chmodSync(parent, 0o755);
  return { folder: join(parent, 'data'), remove: () => rmSync(parent, { recursive: true, force: true }) };
}
