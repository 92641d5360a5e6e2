import type { DealState } from '../../commission/deal';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { problemFrom } from '../../commission/problem-from';
import { findCommission } from '../commissions';
import { rememberTyped } from '../door';
import { IN_WORK } from './making-rules';
import { byClientId, PHOTO_SIZES, photoFieldsSchema, putSizes, storePhoto } from './photos';
import type { Services } from '../services';
import { discard, pathOf, type Received } from '../storage/disk';
import { readMultipart } from '../storage/multipart';
import { makePictures } from '../uploads/pictures';
import { sniffPicture } from '../uploads/sniff';

const LIMIT = { bytes: 30 * 1024 * 1024, words: '30 MB' };

/** States of the deal in which there is something of the work to photograph. */
const SEEN: readonly DealState[] = [...IN_WORK, 'held', 'finished', 'sent', 'issue'];

/**
 * Takes in a photo of the work: turned upright, stripped of metadata, in three sizes, and on the
 * customer's page at once. The same client id twice is one photo.
 */
export async function addPhoto(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  request: Request,
): Promise<Outcome<{ id: string }>> {
  const found = await findCommission(services, actor, ref, 'bench:work');
  if (!found.ok) return found;
  if (!SEEN.includes(found.value.deal))
    return refuse('conflict', 'This commission is not at the bench, so there is nothing of it to photograph.');
  const folder = services.config.uploadsFolder;
  const body = await readMultipart(request, folder, LIMIT);
  if (!body.ok) return body;
  const { file, fields } = body.value;
  rememberTyped(request, fields);
  try {
    return await storeArrived(services, actor, found.value.id, file, fields);
  } finally {
    await discard(folder, file?.key);
  }
}

async function storeArrived(
  services: Services,
  actor: Actor,
  commissionId: string,
  file: Received | null,
  fields: Record<string, string>,
): Promise<Outcome<{ id: string }>> {
  const folder = services.config.uploadsFolder;
  if (!file || file.bytes === 0) return refuse('invalid', 'No photo came with the request. Take it again.');
  const parsed = photoFieldsSchema.safeParse(fields);
  if (!parsed.success) return { ok: false, problem: problemFrom(parsed.error) };
  const known = await byClientId(services, parsed.data.clientId);
  if (known) return done({ id: known.id });
  if (!(await sniffPicture(file.head)))
    return refuse('unsupported', 'This is not a JPEG, PNG or WebP picture. Save it as one of these and send it again.');
  const made = await makePictures(pathOf(folder, file.key), PHOTO_SIZES);
  if (!made.ok) return made;
  const files = await putSizes(folder, made.value);
  return storePhoto(services, actor, commissionId, { fields: parsed.data, sha256: file.sha256, files });
}
