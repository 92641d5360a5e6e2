// OWASP file upload sheet; reliability plan row 17: hostile, broken and mislabelled files do no harm.
import { crc32 } from 'node:zlib';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { receiveUpload } from '../../../src/server/uploads/receive-upload';
import { codeOf, openSetting, type Setting } from '../deal/deal-setting';
import {
  asciiPly,
  binaryPly,
  clientId,
  filesIn,
  formRequest,
  pdf,
  picture,
  step,
  stl,
  stlText,
  threeMf,
  zip,
} from '../../factories/files';

let setting: Setting;
beforeAll(async () => {
  setting = await openSetting();
});
afterAll(() => setting.drop());

let browsers = 0;
const freshBrowser = () => `browser-${(browsers += 1)}`;
const stored = () => filesIn(setting.services.config.uploadsFolder);
const send = (body: Buffer, name: string, more: { id?: string; browser?: string } = {}) =>
  receiveUpload(
    setting.services,
    null,
    more.browser ?? freshBrowser(),
    formRequest(body, name, { clientId: more.id ?? clientId() }),
  );

describe('a file is refused with a sentence and leaves nothing behind', () => {
  const page = '<!doctype html><script>alert(1)</script>';
  const svg = '<svg xmlns="http://www.w3.org/2000/svg"><script>alert(1)</script></svg>';
  const kind = /pictures \(JPEG, PNG, WebP\), PDF drawings, and 3D files/;
  const broken = /damaged|cut short/;
  /** A PNG that claims 40,000 x 40,000 pixels in a few hundred bytes (PNG specification, IHDR). */
  const bomb = async () => {
    const png = Buffer.from(await picture('png'));
    png.writeUInt32BE(40_000, 16);
    png.writeUInt32BE(40_000, 20);
    png.writeUInt32BE(crc32(png.subarray(12, 29)), 29);
    return png;
  };
  it.each([
    ['nothing at all', () => Buffer.alloc(0), 'blade.stl', /empty/],
    ['SVG', () => Buffer.from(svg), 'drawing.svg', kind],
    ['SVG named PNG', () => Buffer.from(svg), 'drawing.png', kind],
    ['SVG named OBJ', () => Buffer.from(svg), 'drawing.obj', kind],
    ['a page', () => Buffer.from(page), 'letter.html', kind],
    ['a page named PDF', () => Buffer.from(page), 'drawing.pdf', kind],
    ['a page named STL', () => Buffer.from(page), 'blade.stl', kind],
    ['a page that begins like an STL', () => Buffer.from(`solid ${page}`), 'blade.stl', kind],
    ['GIF', () => Buffer.from('GIF89a\x01\x00\x01\x00\x00\x00\x00;', 'latin1'), 'a.gif', kind],
    [
      'AVIF',
      () =>
        sharp({ create: { width: 16, height: 16, channels: 3, background: 'red' } })
          .avif()
          .toBuffer(),
      'a.jpg',
      kind,
    ],
    [
      'TIFF',
      () =>
        sharp({ create: { width: 16, height: 16, channels: 3, background: 'red' } })
          .tiff()
          .toBuffer(),
      'a.png',
      kind,
    ],
    ['a program', () => Buffer.concat([Buffer.from('MZ'), Buffer.alloc(4_000, 7)]), 'blade.stl', kind],
    [
      'a program of another kind',
      () => Buffer.concat([Buffer.from('\x7fELF', 'latin1'), Buffer.alloc(4_000)]),
      'a.step',
      kind,
    ],
    ['a ZIP', () => zip({ 'readme.txt': 'hello' }), 'files.zip', /ZIP file without a 3D model/],
    ['a ZIP named 3MF', () => zip({ 'readme.txt': 'hello' }), 'blade.3mf', /ZIP file without a 3D model/],
    [
      'a ZIP with a folder 3D only',
      () => zip({ '3D/readme.txt': 'hello', '[Content_Types].xml': '' }),
      'a.3mf',
      /ZIP file/,
    ],
    ['a 3MF cut short', () => threeMf.subarray(0, threeMf.length - 30), 'a.3mf', /cut short/],
    ['plain text', () => Buffer.from('v for victory\n'), 'notes.obj', kind],
    ['a JPEG cut short', async () => (await picture('jpeg', 900, 700)).subarray(0, 2_000), 'a.jpg', broken],
    ['a PNG cut short', async () => (await picture('png', 900, 700)).subarray(0, 300), 'a.png', broken],
    ['a PDF cut short', () => pdf.subarray(0, 40), 'a.pdf', broken],
    ['a STEP cut short', () => step.subarray(0, 30), 'a.step', broken],
    ['a binary PLY cut short', () => binaryPly.subarray(0, binaryPly.length - 8), 'a.ply', broken],
    [
      'a PLY that promises what is not there',
      () => Buffer.from(asciiPly.toString().replace('vertex 3', 'vertex 3000')),
      'a.ply',
      broken,
    ],
    ['an OBJ without a face', () => Buffer.from('v 0 0 0\nv 1 0 0\n'), 'a.obj', broken],
    ['an ASCII STL cut short', () => stlText.subarray(0, 600), 'a.stl', /./],
    ['a picture of 1,600 million pixels', bomb, 'a.png', /more pixels|damaged/],
  ] as const)('%s', async (_what, make, name, sentence) => {
    const before = stored();
    const refused = await send(Buffer.from(await make()), name);
    expect(refused).toMatchObject({ ok: false, problem: { message: expect.stringMatching(sentence) } });
    expect(['unsupported', 'invalid']).toContain(codeOf(refused));
    expect(stored()).toEqual(before);
  });

  it('a request that is no form, has no file, or no id', async () => {
    const { services } = setting;
    const plain = new Request('http://localhost/', { method: 'POST', body: stl });
    expect(codeOf(await receiveUpload(services, null, 'b', plain))).toBe('unsupported');
    const unbounded = new Request('http://localhost/', {
      method: 'POST',
      body: stl,
      headers: { 'content-type': 'multipart/form-data' },
    });
    expect(codeOf(await receiveUpload(services, null, 'b', unbounded))).toBe('invalid');
    const form = new FormData();
    form.set('clientId', clientId());
    expect(
      codeOf(
        await receiveUpload(services, null, 'b', new Request('http://localhost/', { method: 'POST', body: form })),
      ),
    ).toBe('invalid');
    const before = stored();
    for (const id of ['', 'a', '../../../etc', 'x'.repeat(201), "'; drop table"]) {
      expect(codeOf(await receiveUpload(services, null, 'b', formRequest(stl, 'a.stl', { clientId: id }))), id).toBe(
        'invalid',
      );
    }
    expect(stored()).toEqual(before);
  });
});
