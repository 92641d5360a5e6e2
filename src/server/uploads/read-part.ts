import { open } from 'node:fs/promises';

/** Reads at most `length` bytes of a file from `start`; fewer when it ends before. */
export async function readPart(path: string, start: number, length: number): Promise<Buffer> {
  const handle = await open(path, 'r');
  try {
    const buffer = Buffer.alloc(length);
    const { bytesRead } = await handle.read(buffer, 0, length, Math.max(0, start));
    return buffer.subarray(0, bytesRead);
  } finally {
    await handle.close();
  }
}

/** Reads the last `length` bytes of a file of `bytes`. */
export function readEnd(path: string, bytes: number, length: number): Promise<Buffer> {
  const wanted = Math.min(length, bytes);
  return readPart(path, bytes - wanted, wanted);
}
