import type { StlProblem, Triangle, TriangleSink } from './stl-problems';

/** Binary STL: 80 bytes of header, a 32-bit little-endian count, then 50 bytes a triangle (normal, three corners, two spare). */
export const HEADER_BYTES = 84;
export const RECORD_BYTES = 50;

/**
 * Reads the records of a binary STL in pieces of any length, after its header. Holds at most one split record. The normals
 * in the file are not used: the order of the corners says which side is out.
 */
export function createBinaryRecords(count: number, sink: TriangleSink) {
  const split = new Uint8Array(RECORD_BYTES);
  let held = 0;
  let read = 0;
  let extra = 0;

  function take(view: DataView, offset: number): void {
    const at = (index: number) => view.getFloat32(offset + 12 + index * 4, true);
    const triangle: Triangle = [at(0), at(1), at(2), at(3), at(4), at(5), at(6), at(7), at(8)];
    read += 1;
    sink(triangle);
  }

  return {
    push(chunk: Uint8Array): void {
      let offset = 0;
      if (held > 0) {
        const part = chunk.subarray(0, RECORD_BYTES - held);
        split.set(part, held);
        held += part.length;
        offset = part.length;
        if (held < RECORD_BYTES) return;
        held = 0;
        if (read < count) take(new DataView(split.buffer), 0);
        else extra += RECORD_BYTES;
      }
      const view = new DataView(chunk.buffer, chunk.byteOffset, chunk.byteLength);
      for (; offset + RECORD_BYTES <= chunk.length && read < count; offset += RECORD_BYTES) take(view, offset);
      const rest = chunk.subarray(offset);
      if (read >= count) extra += rest.length;
      else {
        split.set(rest);
        held = rest.length;
      }
    },
    finish(): StlProblem | null {
      if (read < count) {
        const message = `The file says it has ${count} triangles, but it ends after ${read}. It was cut off: send it again.`;
        return { code: 'truncated', message };
      }
      if (extra + held === 0) return null;
      const message = `The file goes on for ${extra + held} bytes after its ${count} triangles. Save it again as STL.`;
      return { code: 'extra-bytes', message };
    },
  };
}
