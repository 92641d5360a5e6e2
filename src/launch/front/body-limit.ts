import type { IncomingMessage } from 'node:http';
import type { Refusal } from './request-rules';

const MB = 1024 * 1024;

/** How much a request may carry and how long its sending may take in all. */
export interface Allowance {
  bytes: number;
  milliseconds: number;
}

const UPLOAD: Allowance = { bytes: 205 * MB, milliseconds: 40 * 60_000 };
const PHOTO: Allowance = { bytes: 32 * MB, milliseconds: 10 * 60_000 };
const FORM: Allowance = { bytes: MB, milliseconds: 60_000 };

/** A sender that is silent for so long in the middle of a body is given up. */
const SILENCE = 30_000;

/**
 * The allowance of a path; uploads and photos are streamed to disk and may be large. Whatever does not come as a form
 * with a file in it is read into memory and stays small everywhere.
 */
export function allowanceFor(path: string, contentType: string | undefined): Allowance {
  if (!contentType?.startsWith('multipart/form-data')) return FORM;
  if (path === '/api/uploads' || path.startsWith('/api/uploads/')) return UPLOAD;
  if (/^\/api\/commissions\/[^/]+\/files$/.test(path)) return UPLOAD;
  if (path.startsWith('/api/') && /\/photos(\/|$)/.test(path)) return PHOTO;
  return FORM;
}

/** Refuses a body that is too large, or whose size is not told beforehand. */
export function refuseBody(req: IncomingMessage, allowance: Allowance): Refusal | undefined {
  if (req.headers['transfer-encoding']) {
    return { status: 411, message: 'Tell the size of the body beforehand (Content-Length).' };
  }
  if (Number(req.headers['content-length'] ?? 0) <= allowance.bytes) return undefined;
  const limit = `${Math.floor(allowance.bytes / MB)} MB`;
  return { status: 413, message: `This is larger than the ${limit} that can be taken here. Send a smaller file.` };
}

/** Cuts the connection of a sender that is too slow, so that nobody holds it open for nothing. */
export function watchSender(req: IncomingMessage, allowance: Allowance): void {
  if (req.complete || !Number(req.headers['content-length'] ?? 0)) return;
  const { socket } = req;
  const timer = setTimeout(() => socket.destroy(), allowance.milliseconds);
  socket.setTimeout(SILENCE);
  const received = () => {
    clearTimeout(timer);
    socket.setTimeout(0);
  };
  req.once('end', received).once('close', received);
}
