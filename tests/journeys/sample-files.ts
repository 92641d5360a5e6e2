import sharp from 'sharp';

/** A file as a browser's file field takes it. */
export interface SampleFile {
  name: string;
  mimeType: string;
  buffer: Buffer;
}

type Point = [number, number, number];

/** A closed, leaf-shaped blade as a binary STL: a lozenge section along 620 mm, widest two thirds along. */
export function bladeStl(): SampleFile {
  const rings = Array.from({ length: 25 }, (_, index) => index / 24).map((t) => ring(t));
  const triangles: Point[][] = [];
  for (let at = 0; at + 1 < rings.length; at += 1) {
    for (let side = 0; side < 4; side += 1) {
      const [a, b] = [rings[at]![side]!, rings[at]![(side + 1) % 4]!];
      const [c, d] = [rings[at + 1]![side]!, rings[at + 1]![(side + 1) % 4]!];
      triangles.push([a, b, d], [a, d, c]);
    }
  }
  const [first, last] = [rings[0]!, rings.at(-1)!];
  triangles.push([first[0]!, first[2]!, first[1]!], [first[0]!, first[3]!, first[2]!]);
  triangles.push([last[0]!, last[1]!, last[2]!], [last[0]!, last[2]!, last[3]!]);
  return { name: 'leaf blade.stl', mimeType: 'model/stl', buffer: binaryStl(triangles) };
}

function ring(t: number): Point[] {
  const half = 8 + 15 * Math.sin(Math.PI * Math.min(1, t * 1.15)) ** 2 * (t < 0.95 ? 1 : 0.4);
  const thick = 4 * (1 - 0.7 * t) + 0.4;
  const x = 620 * t;
  return [
    [x, half, 0],
    [x, 0, thick],
    [x, -half, 0],
    [x, 0, -thick],
  ];
}

/** The binary STL layout: 80 bytes of heading, a count, 50 bytes a triangle, little-endian. */
function binaryStl(triangles: Point[][]): Buffer {
  const buffer = Buffer.alloc(84 + triangles.length * 50);
  buffer.write('blade of a test', 0, 'latin1');
  buffer.writeUInt32LE(triangles.length, 80);
  triangles.forEach((points, index) => {
    const at = 84 + index * 50 + 12;
    points.flat().forEach((value, place) => buffer.writeFloatLE(value, at + place * 4));
  });
  return buffer;
}

/** A one-page PDF with one line of words. */
export function sketchPdf(): SampleFile {
  const stream = 'BT /F1 18 Tf 60 760 Td (Grip: six rivet holes, flanges 4 mm) Tj ET';
  const objects = [
    '<< /Type /Catalog /Pages 2 0 R >>',
    '<< /Type /Pages /Kids [3 0 R] /Count 1 >>',
    '<< /Type /Page /Parent 2 0 R /MediaBox [0 0 595 842] /Contents 4 0 R /Resources << /Font << /F1 5 0 R >> >> >>',
    `<< /Length ${stream.length} >>\nstream\n${stream}\nendstream`,
    '<< /Type /Font /Subtype /Type1 /BaseFont /Helvetica >>',
  ];
  let body = '%PDF-1.4\n';
  const offsets = objects.map((text, index) => {
    const offset = body.length;
    body += `${index + 1} 0 obj\n${text}\nendobj\n`;
    return offset;
  });
  const table = offsets.map((offset) => `${String(offset).padStart(10, '0')} 00000 n \n`).join('');
  const size = objects.length + 1;
  const xref = `xref\n0 ${size}\n0000000000 65535 f \n${table}trailer\n<< /Size ${size} /Root 1 0 R >>\n`;
  const buffer = Buffer.from(`${body}${xref}startxref\n${body.length}\n%%EOF\n`, 'latin1');
  return { name: 'grip sketch.pdf', mimeType: 'application/pdf', buffer };
}

/** A photo as a phone makes it: a JPEG with a place in its metadata. */
export async function benchPhoto(name: string, metal: string): Promise<SampleFile> {
  const drawing = `<svg xmlns="http://www.w3.org/2000/svg" width="1200" height="900">
    <rect width="1200" height="900" fill="#3a3d3f"/>
    <path d="M60 460 L240 420 L760 380 L1140 450 L760 520 L240 490 Z" fill="${metal}"/>
    <path d="M240 455 L1100 452" stroke="#f4e7c8" stroke-width="4" opacity="0.6"/>
  </svg>`;
  const buffer = await sharp(Buffer.from(drawing))
    .withExif({ IFD0: { Make: 'Test' }, IFD3: { GPSLatitudeRef: 'N', GPSLatitude: '51/1 30/1 0/1' } })
    .jpeg({ quality: 80 })
    .toBuffer();
  return { name, mimeType: 'image/jpeg', buffer };
}
