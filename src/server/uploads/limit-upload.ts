import type { Actor } from '../../commission/permissions';
import type { Outcome } from '../../commission/problem';
import { limit } from '../auth/limit';
import type { Services } from '../services';
import { receiveUpload, type UploadAnswer } from './receive-upload';

const PART_BYTES = 10 * 1024 * 1024;

/**
 * Counts a file that is about to arrive against the hour's allowance of `key`: once, and once more for each full
 * 10 MB, so that a few large files weigh as much as many small ones.
 */
export async function limitUpload(services: Services, key: string, request: Request): Promise<Outcome<null>> {
  const bytes = Number(request.headers.get('content-length') ?? 0);
  return limit(services, 'upload', key, 1 + Math.floor(bytes / PART_BYTES));
}

/** Takes in one file of a guest or customer, within what their network may send in an hour. */
export async function takeUpload(
  services: Services,
  actor: Actor,
  sender: { browserId: string; client: string },
  request: Request,
): Promise<Outcome<UploadAnswer>> {
  const allowed = await limitUpload(services, sender.client, request);
  return allowed.ok ? receiveUpload(services, actor, sender.browserId, request) : allowed;
}
