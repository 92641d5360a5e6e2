import { fileTypeFromBuffer } from 'file-type';

/** What a file is by its bytes; its name has no say, except where an OBJ begins with a long comment. */
export type FileKind =
  | { kind: 'picture'; mime: 'image/jpeg' | 'image/png' | 'image/webp'; ending: '.jpg' | '.png' | '.webp' }
  | { kind: 'document'; mime: 'application/pdf'; ending: '.pdf' }
  | {
      kind: 'mesh';
      mime: 'model/stl' | 'model/obj' | 'model/ply' | 'model/3mf';
      ending: '.stl' | '.obj' | '.ply' | '.3mf';
    }
  | { kind: 'step'; mime: 'model/step'; ending: '.step' };

const PICTURES = {
  'image/jpeg': { kind: 'picture', mime: 'image/jpeg', ending: '.jpg' },
  'image/png': { kind: 'picture', mime: 'image/png', ending: '.png' },
  'image/webp': { kind: 'picture', mime: 'image/webp', ending: '.webp' },
} as const satisfies Record<string, FileKind>;

const STL = { kind: 'mesh', mime: 'model/stl', ending: '.stl' } as const;
const OBJ = { kind: 'mesh', mime: 'model/obj', ending: '.obj' } as const;

/** The picture a file is by its first bytes, or null. */
export async function sniffPicture(head: Buffer): Promise<FileKind | null> {
  const found = await fileTypeFromBuffer(head);
  return found && Object.hasOwn(PICTURES, found.mime) ? PICTURES[found.mime as keyof typeof PICTURES] : null;
}

/**
 * Tells a file by its first bytes and its size; it is still to be opened. Null means it is nothing the studio takes.
 *
 * @param head at least the first 4 kB, or the whole file
 * @param bytes size of the whole file
 * @param name as given; only its ending counts, and only for an OBJ that begins with a comment
 */
export async function sniff(head: Buffer, bytes: number, name: string): Promise<FileKind | null> {
  const picture = await sniffPicture(head);
  if (picture) return picture;
  if (isBinaryStl(head, bytes)) return STL;
  if (isZip(head)) return { kind: 'mesh', mime: 'model/3mf', ending: '.3mf' };
  const found = await fileTypeFromBuffer(head);
  if (found?.mime === 'application/pdf') return { kind: 'document', mime: 'application/pdf', ending: '.pdf' };
  // The library calls any text that begins with "solid" an STL; whether it is one is told below.
  return found && found.mime !== 'model/stl' ? null : sniffText(head, name);
}

function sniffText(head: Buffer, name: string): FileKind | null {
  const text = head.toString('latin1');
  const start = text.trimStart();
  if (start.startsWith('ISO-10303-21')) return { kind: 'step', mime: 'model/step', ending: '.step' };
  if (/^ply\r?\n/.test(start)) return { kind: 'mesh', mime: 'model/ply', ending: '.ply' };
  if (/^solid\b/i.test(start)) return /\bfacet\b/i.test(text) ? STL : null;
  if (head.includes(0)) return null;
  const vertex = /^v[ \t]+[-+.\d]+[ \t]+[-+.\d]+[ \t]+[-+.\d]+/m.test(text);
  const commented = /^(#|mtllib\s|o\s|g\s)/.test(start) && name.toLowerCase().endsWith('.obj');
  return vertex || commented ? OBJ : null;
}

function isZip(head: Buffer): boolean {
  return head.length >= 4 && head.readUInt32LE(0) === 0x04034b50;
}

/** A binary STL says its triangle count, and its size follows from it; its header may begin with anything, even "solid". */
function isBinaryStl(head: Buffer, bytes: number): boolean {
  return head.length >= 84 && bytes >= 84 && bytes === 84 + 50 * head.readUInt32LE(80);
}
