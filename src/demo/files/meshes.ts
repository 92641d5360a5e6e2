import { drawingOf } from '../forms';
import { solidOf, type Triangle } from '../pictures/solid';
import type { SentFile } from '../acts/deal';

const HEADER_BYTES = 84;
const RECORD_BYTES = 50;

/** Triangles as a binary STL (80 bytes of header, a count, 50 bytes each), every length multiplied by `scale`. */
function binaryStl(triangles: readonly Triangle[], scale: number): Uint8Array<ArrayBuffer> {
  const bytes = new Uint8Array(HEADER_BYTES + triangles.length * RECORD_BYTES);
  const view = new DataView(bytes.buffer);
  view.setUint32(80, triangles.length, true);
  triangles.forEach((triangle, index) => {
    const start = HEADER_BYTES + index * RECORD_BYTES + 12;
    triangle.flat().forEach((value, place) => view.setFloat32(start + place * 4, value * scale, true));
  });
  return bytes;
}

/** A customer's own sword as a closed 3D file in millimetres, a little larger or smaller than the studio's form. */
export function swordFile(contentFolder: string, name: string, scale: number): SentFile {
  const solid = solidOf(drawingOf(contentFolder, 'leaf-shaped-sword'));
  return { name, type: 'model/stl', bytes: binaryStl(solid, scale) };
}

const MM_PER_INCH = 25.4;

/** A gouge drawn in inches: read as millimetres it is 3.3 mm long, which is what the studio has to notice and ask. */
export function gougeFileInInches(contentFolder: string): SentFile {
  const solid = solidOf(drawingOf(contentFolder, 'socketed-gouge'));
  return { name: 'gouge_socketed_final2.stl', type: 'model/stl', bytes: binaryStl(solid, 1 / MM_PER_INCH) };
}
