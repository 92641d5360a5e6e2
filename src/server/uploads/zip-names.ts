import { readEnd, readPart } from './read-part';

/** End record of a ZIP and one entry of its directory (PKWARE APPNOTE 6.3.10, sections 4.3.16 and 4.3.12). */
const END = { signature: 0x06054b50, bytes: 22, longestComment: 65_535 };
const ENTRY = { signature: 0x02014b50, bytes: 46 };
/** A model in a ZIP has a handful of parts; a directory larger than this is something else. */
const MOST_DIRECTORY_BYTES = 1024 * 1024;

/**
 * Names of the parts of a ZIP, from its directory; nothing is unpacked, so a bomb stays asleep. Null when the file has
 * no whole directory: it is cut short, or damaged.
 */
export async function readZipNames(path: string, bytes: number): Promise<string[] | null> {
  const tail = await readEnd(path, bytes, END.bytes + END.longestComment);
  const end = lastEnd(tail);
  if (!end) return null;
  const [length, start] = [end.readUInt32LE(12), end.readUInt32LE(16)];
  if (length > MOST_DIRECTORY_BYTES || start + length > bytes) return null;
  return namesIn(await readPart(path, start, length), end.readUInt16LE(10));
}

function lastEnd(tail: Buffer): Buffer | null {
  for (let at = tail.length - END.bytes; at >= 0; at -= 1) {
    if (tail.readUInt32LE(at) === END.signature) return tail.subarray(at);
  }
  return null;
}

function namesIn(directory: Buffer, count: number): string[] | null {
  const names: string[] = [];
  let at = 0;
  for (let entry = 0; entry < count; entry += 1) {
    if (at + ENTRY.bytes > directory.length || directory.readUInt32LE(at) !== ENTRY.signature) return null;
    const [name, extra, comment] = [28, 30, 32].map((place) => directory.readUInt16LE(at + place)) as [
      number,
      number,
      number,
    ];
    names.push(directory.toString('utf8', at + ENTRY.bytes, at + ENTRY.bytes + name));
    at += ENTRY.bytes + name + extra + comment;
  }
  return names;
}
