import { Readable } from 'node:stream';
import type { ReadableStream as NodeWebStream } from 'node:stream/web';
import { Busboy, type BusboyFileStream, type BusboyHeaders, type BusboyInstance } from '@fastify/busboy';
import { done, refuse, type Outcome } from '../../commission/problem';
import { flawOf } from '../flaws';
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
 *
 * @throws when the disk cannot take the file
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
  const parts = new Parts(parser, folder);
  const whole = await parts.readAll(Readable.fromWeb(request.body as NodeWebStream));
  if (!whole) return refuse('invalid', 'The file did not arrive whole. Send it again.');
  const { fields, arrival } = parts;
  const file = (await arrival?.received) ?? null;
  const flaw = flawOf(fields);
  if (flaw) {
    await discard(folder, file?.key);
    return refuse('invalid', flaw);
  }
  if (!file || !arrival?.stream.truncated) return done({ fields, file });
  await discard(folder, file.key);
  return refuse(
    'too-large',
    `This file is larger than ${limit.words}. Send a smaller one, or write to us and we find another way.`,
  );
}

interface Arrival {
  stream: BusboyFileStream;
  received: Promise<Received & { name: string }>;
}

/** The parts of one body while they come in. */
class Parts {
  readonly fields: Record<string, string> = {};
  arrival: Arrival | null = null;
  #diskFault: { error: unknown } | null = null;
  #endEarly: (error: unknown) => void = () => undefined;
  readonly #parser: BusboyInstance;
  readonly #folder: string;

  constructor(parser: BusboyInstance, folder: string) {
    this.#parser = parser;
    this.#folder = folder;
    parser.on('field', (name, value) => {
      this.fields[name] = value;
    });
    parser.on('file', (name, stream, fileName) => this.#take(name, stream, fileName));
  }

  /**
   * Reads to the end. False when the body was cut off or is no multipart; what had arrived is gone then. Beyond the
   * limit nothing is written any more, but the rest is read, since a sender that is cut off never hears why.
   */
  async readAll(source: Readable): Promise<boolean> {
    try {
      await new Promise<void>((resolve, reject) => {
        source.once('error', reject);
        source.once('close', () => source.readableEnded || reject(new Error('the sender hung up')));
        this.#parser.once('error', reject);
        this.#parser.once('finish', resolve);
        this.#endEarly = reject;
        source.pipe(this.#parser);
      });
      return true;
    } catch {
      source.destroy();
      await this.#drop();
      if (this.#diskFault) throw this.#diskFault.error;
      return false;
    }
  }

  #take(name: string, stream: BusboyFileStream, fileName: string | undefined): void {
    if (name !== 'file' || this.arrival) return void stream.resume();
    const received = receive(this.#folder, stream).then((file) => ({ ...file, name: fileName ?? '' }));
    this.arrival = { stream, received };
    // A stream that is cut off says so once more after nobody listens; `received` has told it by then.
    stream.on('error', () => undefined);
    received.catch((error: NodeJS.ErrnoException) => {
      if (error.syscall !== undefined) this.#diskFault = { error };
      this.#endEarly(error);
    });
  }

  async #drop(): Promise<void> {
    const { arrival } = this;
    if (!arrival) return;
    arrival.stream.destroy(new Error('the file was cut off'));
    const file = await arrival.received.catch(() => null);
    if (file) await discard(this.#folder, file.key);
  }
}
