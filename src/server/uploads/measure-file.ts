import { createReadStream } from 'node:fs';
import { stat } from 'node:fs/promises';
import type { Measure } from '../../casting/measure';
import { createStlReader } from '../../casting/stl';
import { done, refuse, type Outcome } from '../../commission/problem';

/**
 * Measures an STL on disk, chunk by chunk, so that neither memory nor other people's requests wait on
 * its size. Lengths are in the file's own unit, read as mm. A file that is not what it says is refused.
 */
export async function measureMeshFile(path: string): Promise<Outcome<Measure>> {
  const { size } = await stat(path);
  const reader = createStlReader({ size });
  for await (const chunk of createReadStream(path, { highWaterMark: 256 * 1024 })) reader.push(chunk as Buffer);
  const result = reader.finish();
  return result.ok ? done(result.measure) : refuse('unsupported', result.problem.message);
}
