import { createHash } from 'node:crypto';
import { createWriteStream } from 'node:fs';
import { mkdir, open, rename, rm } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import { Transform, type Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { uuidv7 } from 'uuidv7';

const KEY = /^[a-z]+\/[0-9a-f]{2}\/[0-9a-f-]{36}[a-z0-9.-]*$/;

function checked(key: string): string {
  if (!KEY.test(key)) throw new Error('a storage key was not made by storage');
  return key;
}

/** Where stored files and half-received ones lie; keys are made here and hold no outside text. */
export function pathOf(folder: string, key: string): string {
  return join(folder, checked(key));
}

/** The path of a stored file inside the data folder, as `fileResponse` takes it. */
export function servedPath(key: string): string {
  return `uploads/${checked(key)}`;
}

/** A new key such as "uploads/3f/<uuid>.webp"; two letters spread files over folders. */
export function newKey(area: 'uploads' | 'photos' | 'arriving', ending: string): string {
  const id = uuidv7();
  return `${area}/${id.slice(-2)}/${id}${ending}`;
}

/** What arrived: its size, its hash and its first bytes, for sniffing. */
export interface Received {
  key: string;
  bytes: number;
  sha256: string;
  head: Buffer;
}

const HEAD_BYTES = 4_200;

/**
 * Streams `source` to a new file in the `arriving` area, hashing on the way; memory use does not grow
 * with the file. On failure the part that arrived is deleted and the error thrown on.
 */
export async function receive(folder: string, source: Readable): Promise<Received> {
  const key = newKey('arriving', '.part');
  const path = pathOf(folder, key);
  await mkdir(dirname(path), { recursive: true });
  const hash = createHash('sha256');
  const head: Buffer[] = [];
  let bytes = 0;
  const watch = new Transform({
    transform(chunk: Buffer, _encoding, next) {
      if (bytes < HEAD_BYTES) head.push(chunk.subarray(0, HEAD_BYTES - bytes));
      bytes += chunk.length;
      hash.update(chunk);
      next(null, chunk);
    },
  });
  try {
    await pipeline(source, watch, createWriteStream(path, { flags: 'wx' }));
  } catch (error) {
    await rm(path, { force: true });
    throw error;
  }
  return { key, bytes, sha256: hash.digest('hex'), head: Buffer.concat(head) };
}

/** Moves a received file to its lasting place and makes sure it is on the disk before its row is written. */
export async function keep(folder: string, arrivingKey: string, key: string): Promise<void> {
  const to = pathOf(folder, key);
  await mkdir(dirname(to), { recursive: true });
  const from = pathOf(folder, arrivingKey);
  await flush(from);
  await rename(from, to);
  // The new name is in the folder's own data, which is flushed apart from the file's.
  await flush(dirname(to));
}

async function flush(path: string): Promise<void> {
  const handle = await open(path, 'r');
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

/** Writes a small made file (a thumbnail, a re-encoded picture) under a new key, whole or not at all. */
export async function put(folder: string, area: 'uploads' | 'photos', ending: string, body: Buffer): Promise<string> {
  const key = newKey(area, ending);
  const arriving = newKey('arriving', '.part');
  const path = pathOf(folder, arriving);
  await mkdir(dirname(path), { recursive: true });
  const handle = await open(path, 'wx');
  try {
    await handle.writeFile(body);
  } finally {
    await handle.close();
  }
  await keep(folder, arriving, key);
  return key;
}

/** Deletes stored files; one that is gone already is no error. */
export async function discard(folder: string, ...keys: (string | null | undefined)[]): Promise<void> {
  for (const key of keys) if (key) await rm(pathOf(folder, key), { force: true });
}
