import { createReadStream } from 'node:fs';
import type { FileKind } from './sniff';
import { readPlyHeader } from './ply-header';
import { readEnd, readPart } from './read-part';
import { readZipNames } from './zip-names';

const TAIL_BYTES = 4_096;
const HEAD_BYTES = 64 * 1024;

/** Whether a 3D file other than STL is whole, as far as can be told without building it. */
export async function isWholeModel(path: string, bytes: number, mime: FileKind['mime']): Promise<boolean> {
  switch (mime) {
    case 'model/3mf':
      return holdsModel(await readZipNames(path, bytes));
    case 'model/step':
      return (await readEnd(path, bytes, TAIL_BYTES)).toString('latin1').includes('END-ISO-10303-21');
    case 'model/ply':
      return fitsPly(await readPart(path, 0, HEAD_BYTES), bytes);
    default:
      return isWholeObj(path);
  }
}

/** A 3MF is a ZIP with a model part under `3D/` and a list of content types (3MF core specification, section 2). */
function holdsModel(names: string[] | null): boolean {
  if (!names) return false;
  const has = (pattern: RegExp) => names.some((name) => pattern.test(name));
  return has(/^\/?3D\/[^/]+\.model$/i) && has(/^\[Content_Types\]\.xml$/i);
}

function fitsPly(head: Buffer, bytes: number): boolean {
  const header = readPlyHeader(head);
  return header !== null && header.vertices > 0 && bytes >= header.leastBytes;
}

/** Text throughout, with at least one vertex and one face. Read in chunks: what spans two of them is looked for again. */
async function isWholeObj(path: string): Promise<boolean> {
  const found = { v: false, f: false };
  let rest = '\n';
  for await (const chunk of createReadStream(path, { highWaterMark: HEAD_BYTES })) {
    const bytes = chunk as Buffer;
    if (bytes.includes(0)) return false;
    const text = rest + bytes.toString('latin1');
    found.v ||= /\nv[ \t]/.test(text);
    found.f ||= /\nf[ \t]/.test(text);
    rest = text.slice(-3);
  }
  return found.v && found.f;
}
