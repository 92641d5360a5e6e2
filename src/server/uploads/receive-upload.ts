import { and, count, eq, isNull, sum } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import type { Measure } from '../../casting/measure';
import { may, type Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { uploads } from '../db/schema/commissions';
import type { Services } from '../services';
import { discard, keep, newKey, servedPath } from '../storage/disk';
import { readMultipart } from '../storage/multipart';
import { inspectFile, type Inspected } from './inspect';

const MB = 1024 * 1024;
const LIMIT = { bytes: 200 * MB, words: '200 MB' };
const MOST_FILES = 40;
const MOST_LETTERS = 120;
const MOST_BYTES = 1_500 * MB;

/** What the sender is told about a file now in the studio's keeping. Sizes in bytes. */
export interface UploadAnswer {
  id: string;
  name: string;
  kind: 'picture' | 'document' | 'mesh' | 'step';
  bytes: number;
  thumb: string | null;
  measure: Measure | null;
}

type UploadRow = typeof uploads.$inferSelect;

/**
 * Takes in one file from a customer or a guest. It is streamed to disk, told by its bytes, opened, and
 * stored under a name of ours. The same client id from the same browser answers as the first time did.
 */
export async function receiveUpload(
  services: Services,
  actor: Actor,
  browserId: string,
  request: Request,
): Promise<Outcome<UploadAnswer>> {
  if (!may(actor, 'upload:send'))
    return refuse('not-allowed', 'Files are sent in by customers. Use the bench page for photos of the work.');
  const full = await tooMuch(services, browserId);
  if (full) return full;
  const folder = services.config.uploadsFolder;
  const body = await readMultipart(request, folder, LIMIT);
  if (!body.ok) return body;
  const { file, fields } = body.value;
  if (!file) return refuse('invalid', 'No file came with the request. Choose one and send it again.');
  const clientId = fields['clientId'];
  if (!clientId || !/^[0-9A-Za-z_/-]{4,200}$/.test(clientId)) {
    await discard(folder, file.key);
    return refuse('invalid', 'The file came without an id of its own. Reload the page and send it again.');
  }
  const known = await findByClientId(services, browserId, clientId);
  if (known) {
    await discard(folder, file.key);
    return done(answerOf(known));
  }
  const inspected = await inspectFile(folder, file);
  if (!inspected.ok) {
    await discard(folder, file.key);
    return inspected;
  }
  const key = inspected.value.storageKey ?? newKey('uploads', inspected.value.ending);
  if (inspected.value.storageKey) await discard(folder, file.key);
  else await keep(folder, file.key, key);
  return store(services, { actor, browserId, clientId, file, key, found: inspected.value });
}

async function tooMuch(services: Services, browserId: string): Promise<Outcome<never> | null> {
  const [held] = await services.db
    .select({ files: count(), bytes: sum(uploads.bytes) })
    .from(uploads)
    .where(and(eq(uploads.browserId, browserId), isNull(uploads.commissionId)));
  if ((held?.files ?? 0) < MOST_FILES && Number(held?.bytes ?? 0) < MOST_BYTES) return null;
  return refuse(
    'too-many',
    `${MOST_FILES} files or 1.5 GB are waiting here already. Remove some, send what you have, or write to us about the rest.`,
  );
}

async function findByClientId(services: Services, browserId: string, clientId: string): Promise<UploadRow | undefined> {
  const [row] = await services.db
    .select()
    .from(uploads)
    .where(and(eq(uploads.browserId, browserId), eq(uploads.clientId, clientId)));
  return row;
}

interface Arrived {
  actor: Actor;
  browserId: string;
  clientId: string;
  file: { name: string; bytes: number; sha256: string };
  key: string;
  found: Inspected;
}

async function store(services: Services, arrived: Arrived): Promise<Outcome<UploadAnswer>> {
  const { file, found } = arrived;
  const [row] = await services.db
    .insert(uploads)
    .values({
      id: uuidv7(),
      clientId: arrived.clientId,
      browserId: arrived.browserId,
      ownerId: arrived.actor?.id ?? null,
      kind: found.kind,
      displayName: displayName(file.name),
      mime: found.mime,
      bytes: found.bytes ?? file.bytes,
      sha256: found.sha256 ?? file.sha256,
      storageKey: arrived.key,
      thumbKey: found.thumbKey,
      measure: found.measure,
      createdAt: services.now(),
    })
    .onConflictDoNothing()
    .returning();
  if (row) return done(answerOf(row));
  // A retry of the same file won the race: keep its row and drop our copy.
  await discard(services.config.uploadsFolder, arrived.key, found.thumbKey);
  const rival = await findByClientId(services, arrived.browserId, arrived.clientId);
  if (!rival) throw new Error('an upload lost a race that nobody won');
  return done(answerOf(rival));
}

/** A name fit to be shown: no path, no control or direction-changing characters, not too long. */
export function displayName(name: string): string {
  const last = name.normalize('NFC').split(/[\\/]/).at(-1) ?? '';
  const clean = last
    .toWellFormed()
    .replace(/[\p{Cc}\p{Cf}]/gu, '')
    .trim();
  return [...clean].slice(0, MOST_LETTERS).join('') || 'file';
}

/** The answer for a stored row. */
export function answerOf(row: UploadRow): UploadAnswer {
  return {
    id: row.id,
    name: row.displayName,
    kind: row.kind,
    bytes: row.bytes,
    thumb: row.thumbKey ? `/api/uploads/${row.id}/thumb` : null,
    measure: row.measure,
  };
}

/** The path under which the bytes of a stored upload are served. */
export function uploadPath(row: UploadRow, part: 'file' | 'thumb'): string | null {
  const key = part === 'file' ? row.storageKey : row.thumbKey;
  return key ? servedPath(key) : null;
}
