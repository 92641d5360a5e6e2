import { Readable } from 'node:stream';
import type { ReadableStream as NodeWebStream } from 'node:stream/web';
import { Busboy, type BusboyHeaders, type BusboyInstance } from '@fastify/busboy';
import { done, refuse, type Outcome } from '../../commission/problem';
import { discard, receive, type Received } from './disk';

/** A multipart body taken apart: small text fields, and one file already on disk. */
export interface Multipart {
  fields: Record<string, string>;
  file: (Received & { name: string }) | null;
}

/** How large the one file may be. */
export interface FileLimit {
  bytes: number;
  words: string;
}

/**
 * Reads a multipart request with one file in field `file`. The file is streamed to disk under `folder`;
 * a sender that hangs up, or a file over the limit, leaves nothing behind.
 */
export async function readMultipart(request: Request, folder: string, limit: FileLimit): Promise<Outcome<Multipart>> {
  const type = request.headers.get('content-type') ?? '';
  if (!type.startsWith('multipart/form-data') || !request.body) {
    return refuse('unsupported', 'Send the file as multipart form data in the field “file”.');
  }
  let parser: BusboyInstance;
  try {
    parser = new Busboy({
      headers: { 'content-type': type } as BusboyHeaders,
      limits: { files: 1, fileSize: limit.bytes, fields: 20, fieldSize: 8_000, parts: 24 },
    });
  } catch {
    return refuse('invalid', 'The form data has no boundary, so its parts cannot be told apart. Send it again.');
  }
  return takeApart(request, parser, folder, limit);
}

async function takeApart(
  request: Request,
  parser: BusboyInstance,
  folder: string,
  limit: FileLimit,
): Promise<Outcome<Multipart>> {
  const fields: Record<string, string> = {};
  let arriving: Promise<Received & { name: string; cut: boolean }> | null = null;
  parser.on('field', (name, value) => {
    fields[name] = value;
  });
  parser.on('file', (name, stream, fileName) => {
    if (name !== 'file') return void stream.resume();
    arriving = receive(folder, stream).then((received) => ({
      ...received,
      name: fileName ?? '',
      cut: stream.truncated,
    }));
    // Awaited below; this keeps a failure from being reported as unhandled before that.
    arriving.catch(() => undefined);
  });
  try {
    await new Promise<void>((resolve, reject) => {
      const source = Readable.fromWeb(request.body as NodeWebStream);
      source.once('error', reject);
      parser.once('error', reject);
      parser.once('finish', resolve);
      source.pipe(parser);
    });
  } catch {
    await dropArrived(folder, arriving);
    return refuse('invalid', 'The file did not arrive whole. Send it again.');
  }
  const file = arriving === null ? null : await (arriving as Promise<Received & { name: string; cut: boolean }>);
  if (file?.cut) {
    await discard(folder, file.key);
    return refuse(
      'too-large',
      `This file is larger than ${limit.words}. Send a smaller one, or write to us and we find another way.`,
    );
  }
  return done({ fields, file });
}

async function dropArrived(folder: string, arriving: Promise<Received> | null): Promise<void> {
  const received = await arriving?.catch(() => null);
  if (received) await discard(folder, received.key);
}
