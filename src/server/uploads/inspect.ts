import { createHash } from 'node:crypto';
import type { Measure } from '../../casting/measure';
import { done, refuse, type Outcome } from '../../commission/problem';
import { pathOf, put, type Received } from '../storage/disk';
import { measureMeshFile } from './measure-file';
import { isWholeModel } from './open-model';
import { makePictures } from './pictures';
import { readEnd } from './read-part';
import { sniff, type FileKind } from './sniff';

/** What was found in a file, and the copies made of it. `storageKey` is set when a new file replaces the sent one. */
export interface Inspected {
  kind: FileKind['kind'];
  mime: FileKind['mime'];
  ending: string;
  storageKey: string | null;
  thumbKey: string | null;
  measure: Measure | null;
  /** Size and hash of the new file. */
  bytes?: number;
  sha256?: string;
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
  if (found.mime !== 'model/stl') return inspectModel(path, file.bytes, plain);
  const measure = await measureMeshFile(path);
  return measure.ok ? done({ ...plain, measure: measure.value }) : measure;
}

const MODEL_NAMES: Record<string, string> = {
  'model/obj': 'OBJ',
  'model/ply': 'PLY',
  'model/3mf': '3MF',
  'model/step': 'STEP',
};

async function inspectModel(path: string, bytes: number, plain: Inspected): Promise<Outcome<Inspected>> {
  if (await isWholeModel(path, bytes, plain.mime)) return done(plain);
  return refuse(
    'unsupported',
    plain.mime === 'model/3mf'
      ? `This is a ZIP file without a 3D model in it, or a 3MF that is cut short. ${TAKEN} Export it again.`
      : `This ${MODEL_NAMES[plain.mime]} file is cut short or damaged. Export it again and send that.`,
  );
}

async function inspectPicture(folder: string, path: string): Promise<Outcome<Inspected>> {
  const made = await makePictures(path, { whole: 3_000, thumb: 480 });
  if (!made.ok) return made;
  const { whole, thumb } = made.value;
  const storageKey = await put(folder, 'uploads', '.webp', whole.body);
  const thumbKey = await put(folder, 'uploads', '.webp', thumb.body);
  const sha256 = createHash('sha256').update(whole.body).digest('hex');
  const stored = { storageKey, thumbKey, bytes: whole.body.length, sha256 };
  return done({ kind: 'picture', mime: 'image/webp', ending: '.webp', measure: null, ...stored });
}

const TAIL = 2_048;

/** A PDF that begins as one and ends as one; a cut or renamed file does not. It is never rendered here. */
async function inspectPdf(path: string, bytes: number, plain: Inspected): Promise<Outcome<Inspected>> {
  const text = (await readEnd(path, bytes, TAIL)).toString('latin1');
  if (text.includes('%%EOF') && text.includes('startxref')) return done(plain);
  return refuse(
    'unsupported',
    'This PDF is cut short or damaged. Open it on your device, save it again and send that.',
  );
}
