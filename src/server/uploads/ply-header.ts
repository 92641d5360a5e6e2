/** Bytes of PLY's number types, by both of their names. Source: G. Turk, "The PLY Polygon File Format", 1994. */
const BYTES: Record<string, number> = {
  char: 1,
  uchar: 1,
  int8: 1,
  uint8: 1,
  short: 2,
  ushort: 2,
  int16: 2,
  uint16: 2,
  int: 4,
  uint: 4,
  int32: 4,
  uint32: 4,
  float: 4,
  float32: 4,
  double: 8,
  float64: 8,
};
const SIDES_OF_A_FACE = 3;

/** What the header of a PLY promises: its vertices, and the fewest bytes a whole file of that header has. */
export interface PlyHeader {
  vertices: number;
  leastBytes: number;
}

/** Reads a PLY's header from the start of the file; null when it is none. */
export function readPlyHeader(head: Buffer): PlyHeader | null {
  const match = /^ply\r?\n([\s\S]*?)\nend_header\r?\n/.exec(head.toString('latin1'));
  const lines = match?.[1]?.split(/\r?\n/).map((line) => line.trim().split(/\s+/)) ?? [];
  const format = lines.find(([word]) => word === 'format')?.[1];
  if (!match || !['ascii', 'binary_little_endian', 'binary_big_endian'].includes(format ?? '')) return null;
  let [vertices, body, count] = [0, 0, 0];
  for (const [word, first = '', second = '', third = ''] of lines) {
    if (word === 'element') {
      count = Number(second);
      if (!Number.isSafeInteger(count) || count < 0) return null;
      if (first === 'vertex') vertices = count;
    }
    if (word === 'property') body += count * (format === 'ascii' ? 2 : propertyBytes(first, second, third));
  }
  return { vertices, leastBytes: match[0].length + Math.max(0, body - (format === 'ascii' ? 1 : 0)) };
}

function propertyBytes(type: string, countType: string, itemType: string): number {
  if (type !== 'list') return BYTES[type] ?? 1;
  return (BYTES[countType] ?? 1) + SIDES_OF_A_FACE * (BYTES[itemType] ?? 1);
}
