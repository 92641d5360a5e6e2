import { createMeasurer, type Measure } from './measure';
import { createAsciiReader } from './stl-ascii';
import { createBinaryRecords, HEADER_BYTES, RECORD_BYTES } from './stl-binary';
import type { StlProblem, Triangle, TriangleSink } from './stl-problems';

/** Bytes looked at before a file is called text: enough for the header and the first lines of an ASCII file. */
const HEAD_BYTES = 512;

/** 200 MB of binary STL hold about four million triangles. */
const MOST_TRIANGLES = 4_500_000;

export type StlResult =
  | { ok: true; format: 'binary' | 'ascii'; measure: Measure }
  | { ok: false; problem: StlProblem; trianglesRead: number };

export interface StlOptions {
  /** Length of the whole file in bytes, when known: it settles whether a file that begins with "solid" is binary. */
  size?: number;
  mostTriangles?: number;
  /** Also given every triangle, for a drawing or a converter. */
  sink?: TriangleSink;
}

interface Body {
  push: (chunk: Uint8Array) => void;
  finish: () => StlProblem | null;
}

function countOf(head: Uint8Array): number {
  return new DataView(head.buffer, head.byteOffset, head.byteLength).getUint32(80, true);
}

/** No control characters but white space. A binary STL's count has zero bytes in it. */
function isText(head: Uint8Array): boolean {
  return !head.some((byte) => byte < 32 && byte !== 9 && byte !== 10 && byte !== 13);
}

const notStl = (message: string): StlProblem => ({ code: 'not-stl', message });

function detect(head: Uint8Array, size: number | undefined, most: number): 'binary' | 'ascii' | StlProblem {
  if (head.length === 0) return { code: 'empty', message: 'The file is empty.' };
  const headed = head.length >= HEADER_BYTES;
  const bytes = headed ? HEADER_BYTES + countOf(head) * RECORD_BYTES : 0;
  if (headed && bytes === size) return 'binary';
  if (isText(head)) {
    const solid = /^\s*solid\b/i.test(new TextDecoder('latin1').decode(head));
    return solid ? 'ascii' : notStl('The file is text, but it does not begin with "solid": it is no STL.');
  }
  if (!headed) return notStl(`The file is ${head.length} bytes long; even an empty binary STL has ${HEADER_BYTES}.`);
  const alien = size !== undefined && countOf(head) > most && bytes > size * 4;
  return alien
    ? notStl('The file’s length does not fit a binary STL at all: it is some other kind of file.')
    : 'binary';
}

function joined(parts: readonly Uint8Array[]): Uint8Array {
  const whole = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    whole.set(part, at);
    at += part.length;
  }
  return whole;
}

function tooMany(count: number, most: number): StlProblem {
  const [many, limit] = [count, most].map((value) => value.toLocaleString('en-GB'));
  const message = `The file has ${many} triangles; we read up to ${limit}. Reduce its detail and send it again.`;
  return { code: 'too-many', message };
}

/**
 * Reads an STL, binary or ASCII, from chunks of any length, and measures it; a file of any size needs bounded memory.
 * The format is decided by the content, not by the word "solid" alone. Errors are values that say what and where.
 */
export function createStlReader(options: StlOptions = {}) {
  const most = options.mostTriangles ?? MOST_TRIANGLES;
  const measurer = createMeasurer();
  const waiting: Uint8Array[] = [];
  let waitingBytes = 0;
  let triangles = 0;
  let body: Body | null = null;
  let format: 'binary' | 'ascii' = 'binary';
  let problem: StlProblem | undefined;

  const take = (triangle: Triangle) => {
    triangles += 1;
    if (triangles > most) problem ??= tooMany(triangles, most);
    if (problem) return;
    measurer.add(triangle);
    options.sink?.(triangle);
  };

  /** Chooses the format once enough has come, and hands on what was kept back. */
  function begin(): void {
    const head = joined(waiting);
    waiting.length = 0;
    const found = detect(head.subarray(0, HEAD_BYTES), options.size, most);
    if (typeof found !== 'string') {
      problem = found;
      return;
    }
    format = found;
    if (found === 'binary' && countOf(head) > most) problem = tooMany(countOf(head), most);
    else if (found === 'binary') body = createBinaryRecords(countOf(head), take);
    else body = createAsciiReader(take);
    body?.push(found === 'binary' ? head.subarray(HEADER_BYTES) : head);
  }

  return {
    push(chunk: Uint8Array): void {
      if (problem) return;
      if (body) return body.push(chunk);
      waiting.push(chunk.slice());
      waitingBytes += chunk.length;
      if (waitingBytes >= HEAD_BYTES) begin();
    },
    finish(): StlResult {
      if (!body && !problem) begin();
      const last = body?.finish() ?? null;
      const wrong = problem ?? last;
      return wrong
        ? { ok: false, problem: wrong, trianglesRead: triangles }
        : { ok: true, format, measure: measurer.finish() };
    },
  };
}

/** Reads a whole STL that is in memory already. */
export function readStl(bytes: Uint8Array, options: StlOptions = {}): StlResult {
  const reader = createStlReader({ size: bytes.length, ...options });
  reader.push(bytes);
  return reader.finish();
}
