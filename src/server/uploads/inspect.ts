import { open } from 'node:fs/promises';
import type { Measure } from '../../casting/measure';
import { done, refuse, type Outcome } from '../../commission/problem';
import { pathOf, put, type Received } from '../storage/disk';
import { measureMeshFile } from './measure-file';
import { makePictures } from './pictures';
import { sniff, type FileKind } from './sniff';

/** What was found in a file, and the copies made of it. `storageKey` is set when a new file replaces the sent one. */
export interface Inspected {
  kind: FileKind['kind'];
  mime: string;
  ending: string;
  storageKey: string | null;
  thumbKey: string | null;
  measure: Measure | null;
  bytes?: number;
}

const TAKEN = 'We take pictures (JPEG, PNG, WebP), PDF drawings, and 3D files (STL, OBJ, PLY, 3MF, STEP).';

/** Tells what a received file is and opens it to be sure. Pictures are made anew without metadata; other files stay as sent. */
export async function inspectFile(folder: string, file: Received & { name: string }): Promise<Outcome<Inspected>> {
  if (file.bytes === 0) return refuse('invalid', 'This file is empty. Check it on your device and send it again.');
  const found = await sniff(file.head, file.bytes, file.name);
  if (!found)
    return refuse(
      'unsupported',
      `We cannot take this kind of file. ${TAKEN} A file keeps its kind when it is renamed, so export it again.`,
    );
  const path = pathOf(folder, file.key);
  if (found.kind === 'picture') return inspectPicture(folder, path);
  const plain = {
    kind: found.kind,
    mime: found.mime,
    ending: found.ending,
    storageKey: null,
    thumbKey: null,
    measure: null,
  };
  if (found.kind === 'document') return inspectPdf(path, file.bytes, plain);
  if (found.mime !== 'model/stl') return done(plain);
  const measure = await measureMeshFile(path);
  return measure.ok ? done({ ...plain, measure: measure.value }) : measure;
}

async function inspectPicture(folder: string, path: string): Promise<Outcome<Inspected>> {
  const made = await makePictures(path, { whole: 3_000, thumb: 480 });
  if (!made.ok) return made;
  const { whole, thumb } = made.value;
  return done({
    kind: 'picture',
    mime: 'image/webp',
    ending: '.webp',
    storageKey: await put(folder, 'uploads', '.webp', whole.body),
    thumbKey: await put(folder, 'uploads', '.webp', thumb.body),
    measure: null,
    bytes: whole.body.length,
  });
}

const TAIL = 2_048;

/** A PDF that begins as one and ends as one; a cut or renamed file does not. It is never rendered here. */
async function inspectPdf(path: string, bytes: number, plain: Inspected): Promise<Outcome<Inspected>> {
  const handle = await open(path, 'r');
  try {
    const tail = Buffer.alloc(Math.min(TAIL, bytes));
    await handle.read(tail, 0, tail.length, bytes - tail.length);
    const text = tail.toString('latin1');
    if (text.includes('%%EOF') && text.includes('startxref')) return done(plain);
  } finally {
    await handle.close();
  }
  return refuse(
    'unsupported',
    'This PDF is cut short or damaged. Open it on your device, save it again and send that.',
  );
}
