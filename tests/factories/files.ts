import { existsSync, readdirSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { deflateRawSync, crc32 } from 'node:zlib';
import sharp from 'sharp';
import { asciiStl, binaryStl, box } from '../casting/solids';

/** A picture of stripes with a mark of another colour in its upper left corner, so that turning it shows. */
export async function picture(kind: 'jpeg' | 'png' | 'webp', width = 120, height = 80): Promise<Buffer> {
  const pixels = Buffer.alloc(width * height * 3);
  for (let y = 0; y < height; y += 1) {
    for (let x = 0; x < width; x += 1) {
      const corner = x < width / 2 && y < height / 2;
      pixels.set(corner ? [200, 30, 30] : [20, 60, 120], (y * width + x) * 3);
    }
  }
  const image = sharp(pixels, { raw: { width, height, channels: 3 } });
  return image.toFormat(kind).toBuffer();
}

/** A JPEG as a phone takes it, held sideways: with its place, its maker, and the turn to be made (EXIF 3.0, tag 0x0112). */
export async function phonePhoto(orientation: number, width = 400, height = 300): Promise<Buffer> {
  return sharp(await picture('jpeg', width, height))
    .withExif({
      IFD0: { Make: 'Test phone of Isolde', ImageDescription: 'Kitchen table', Artist: 'Isolde Wintermere' },
      IFD3: {
        GPSLatitudeRef: 'N',
        GPSLatitude: '51/1 30/1 3230/100',
        GPSLongitudeRef: 'W',
        GPSLongitude: '0/1 7/1 4366/100',
      },
    })
    .withXmp('<x:xmpmeta xmlns:x="adobe:ns:meta/"><secret>Quayside Stairs</secret></x:xmpmeta>')
    .withMetadata({ orientation })
    .jpeg()
    .toBuffer();
}

/** A ZIP of these parts (PKWARE APPNOTE), packed with deflate. */
export function zip(parts: Record<string, string>): Buffer {
  const locals: Buffer[] = [];
  const entries: Buffer[] = [];
  let at = 0;
  for (const [name, text] of Object.entries(parts)) {
    const body = deflateRawSync(Buffer.from(text));
    const fields = Buffer.alloc(26);
    fields.writeUInt16LE(20, 0);
    fields.writeUInt16LE(8, 4);
    fields.writeUInt32LE(crc32(text), 10);
    fields.writeUInt32LE(body.length, 14);
    fields.writeUInt32LE(Buffer.byteLength(text), 18);
    fields.writeUInt16LE(Buffer.byteLength(name), 22);
    const local = Buffer.concat([Buffer.from('PK\x03\x04', 'latin1'), fields, Buffer.from(name), body]);
    const place = Buffer.alloc(14);
    place.writeUInt32LE(at, 10);
    entries.push(Buffer.concat([Buffer.from('PK\x01\x02\x14\x00', 'latin1'), fields, place, Buffer.from(name)]));
    locals.push(local);
    at += local.length;
  }
  const directory = Buffer.concat(entries);
  const end = Buffer.alloc(22);
  end.writeUInt32LE(0x06054b50, 0);
  end.writeUInt16LE(entries.length, 8);
  end.writeUInt16LE(entries.length, 10);
  end.writeUInt32LE(directory.length, 12);
  end.writeUInt32LE(at, 16);
  return Buffer.concat([...locals, directory, end]);
}

const text = (...lines: string[]) => Buffer.from(`${lines.join('\n')}\n`);

export const pdf = text('%PDF-1.7', '1 0 obj<</Type/Catalog>>endobj', 'xref', '0 1', 'startxref', '9', '%%EOF');
export const obj = text('# a triangle', 'v 0 0 0', 'v 10 0 0', 'v 0 10 0', 'f 1 2 3');
export const step = text('ISO-10303-21;', 'HEADER;', 'ENDSEC;', 'DATA;', 'ENDSEC;', 'END-ISO-10303-21;');
export const asciiPly = text(
  'ply',
  'format ascii 1.0',
  'element vertex 3',
  'property float x',
  'property float y',
  'property float z',
  'element face 1',
  'property list uchar int vertex_indices',
  'end_header',
  '0 0 0',
  '10 0 0',
  '0 10 0',
  '3 0 1 2',
);
export const binaryPly = Buffer.concat([
  text(
    'ply',
    'format binary_little_endian 1.0',
    'element vertex 3',
    'property float x',
    'property float y',
    'property float z',
    'element face 1',
    'property list uchar int vertex_indices',
    'end_header',
  ),
  Buffer.alloc(3 * 12 + 13),
]);
export const threeMf = zip({
  '[Content_Types].xml': '<Types/>',
  '_rels/.rels': '<Relationships/>',
  '3D/3dmodel.model': '<model/>',
});
export const stl = Buffer.from(binaryStl(box([60, 40, 20])));
export const stlText = Buffer.from(asciiStl(box([60, 40, 20])));

let counter = 0;
export const clientId = (): string => `uppy-file-${String((counter += 1)).padStart(4, '0')}`;

/** A request as the page's uploader sends it: text fields, then the file. */
export function formRequest(body: Buffer, name: string, fields: Record<string, string> = {}): Request {
  const form = new FormData();
  for (const [key, value] of Object.entries(fields)) form.set(key, value);
  form.set('file', new File([new Uint8Array(body)], name));
  return new Request('http://localhost/api/uploads', { method: 'POST', body: form });
}

const BOUNDARY = '----a-boundary-of-the-tests';

/** A multipart body that is made while it is read: `chunks` of the file; `whole` false leaves out its end. */
export function streamedRequest(
  chunks: AsyncIterable<Uint8Array> | Iterable<Uint8Array>,
  { name = 'blade.stl', id = clientId(), whole = true }: { name?: string; id?: string; whole?: boolean } = {},
): Request {
  async function* body() {
    const part = (head: string) => Buffer.from(`--${BOUNDARY}\r\nContent-Disposition: form-data; ${head}\r\n`);
    yield Buffer.concat([part('name="clientId"'), Buffer.from(`\r\n${id}\r\n`)]);
    yield Buffer.concat([
      part(`name="file"; filename="${name}"`),
      Buffer.from('Content-Type: application/octet-stream\r\n\r\n'),
    ]);
    yield* chunks;
    if (whole) yield Buffer.from(`\r\n--${BOUNDARY}--\r\n`);
  }
  return new Request('http://localhost/api/uploads', {
    method: 'POST',
    body: Readable.toWeb(Readable.from(body(), { objectMode: false, highWaterMark: 1 })) as unknown as BodyInit,
    headers: { 'content-type': `multipart/form-data; boundary=${BOUNDARY}` },
    duplex: 'half',
  } as RequestInit);
}

/** Every file below a folder, as its path there. */
export function filesIn(folder: string): string[] {
  if (!existsSync(folder)) return [];
  return readdirSync(folder, { recursive: true })
    .map(String)
    .filter((name) => statSync(join(folder, name)).isFile())
    .sort();
}
