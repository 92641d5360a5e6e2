import { fileTypeFromBuffer } from 'file-type';

/** What a file is by its bytes; its name has no say, except between text formats that look alike. */
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

/**
 * Tells a file by its first bytes and its size. Null means it is nothing the studio takes.
 *
 * @param head at least the first 4 kB, or the whole file
 * @param bytes size of the whole file
 * @param name as given; only its ending counts, and only between text formats
 */
export async function sniff(head: Buffer, bytes: number, name: string): Promise<FileKind | null> {
  const found = await fileTypeFromBuffer(head);
  if (found && found.mime in PICTURES) return PICTURES[found.mime as keyof typeof PICTURES];
  if (found?.mime === 'application/pdf') return { kind: 'document', mime: 'application/pdf', ending: '.pdf' };
  if (isZip(head))
    return head.includes('3D/') || ends(name, '.3mf') ? { kind: 'mesh', mime: 'model/3mf', ending: '.3mf' } : null;
  if (isBinaryStl(head, bytes)) return STL;
  if (found) return null;
  return sniffText(head, name);
}

function sniffText(head: Buffer, name: string): FileKind | null {
  const text = head.toString('latin1');
  const start = text.trimStart().slice(0, 200);
  if (start.startsWith('ISO-10303-21')) return { kind: 'step', mime: 'model/step', ending: '.step' };
  if (/^ply\r?\n/.test(start)) return { kind: 'mesh', mime: 'model/ply', ending: '.ply' };
  if (/^solid\b/i.test(start) && /\bfacet\b/i.test(text)) return STL;
  if (ends(name, '.obj') && /^(v|vn|vt|f|g|o|s|usemtl|mtllib|#)\s/m.test(start) && !text.includes('\0')) {
    return { kind: 'mesh', mime: 'model/obj', ending: '.obj' };
  }
  return null;
}

function isZip(head: Buffer): boolean {
  return head.length >= 4 && head.readUInt32LE(0) === 0x04034b50;
}

/** A binary STL says its triangle count, and its size follows from it; its header may begin with anything, even "solid". */
function isBinaryStl(head: Buffer, bytes: number): boolean {
  return head.length >= 84 && bytes >= 84 && bytes === 84 + 50 * head.readUInt32LE(80);
}

function ends(name: string, ending: string): boolean {
  return name.toLowerCase().endsWith(ending);
}
