// Issue section 5; reliability plan row 17; OWASP file upload sheet: told by bytes, opened, names never trusted.
import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { eq } from 'drizzle-orm';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readStl } from '../../../src/casting/stl';
import { uploads } from '../../../src/server/db/schema/commissions';
import { listUnusedUploads } from '../../../src/server/uploads/list-uploads';
import { findUpload, removeUpload } from '../../../src/server/uploads/read-upload';
import { displayName, receiveUpload, uploadPath } from '../../../src/server/uploads/receive-upload';
import { codeOf, newEnquiry, openSetting, SENDER, type Setting } from '../deal/deal-setting';
import {
  asciiPly,
  binaryPly,
  clientId,
  filesIn,
  formRequest,
  obj,
  pdf,
  picture,
  phonePhoto,
  step,
  stl,
  stlText,
  threeMf,
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

describe('a file is told by its bytes under any name', () => {
  it.each([
    ['JPEG', () => picture('jpeg'), 'picture'],
    ['PNG', () => picture('png'), 'picture'],
    ['WebP', () => picture('webp'), 'picture'],
    ['PDF', () => pdf, 'document'],
    ['binary STL', () => stl, 'mesh'],
    ['ASCII STL', () => stlText, 'mesh'],
    ['OBJ', () => obj, 'mesh'],
    ['ASCII PLY', () => asciiPly, 'mesh'],
    ['binary PLY', () => binaryPly, 'mesh'],
    ['3MF', () => threeMf, 'mesh'],
    ['STEP', () => step, 'step'],
  ] as const)('%s', async (_what, make, kind) => {
    const body = await make();
    for (const name of ['right.bin', 'photo.jpg', 'model.exe', 'noending']) {
      expect(await send(body, name), name).toMatchObject({ ok: true, value: { kind, name } });
    }
  });

  it('an OBJ that begins with a long comment is told by its ending, and still opened', async () => {
    const commented = Buffer.concat([Buffer.from(`${'# a long licence\n'.repeat(400)}`), obj]);
    expect(await send(commented, 'blade.obj')).toMatchObject({ ok: true, value: { kind: 'mesh' } });
    expect(codeOf(await send(Buffer.from('# only a comment\n'.repeat(400)), 'blade.obj'))).toBe('unsupported');
  });
});

describe('what is kept', () => {
  it('of a picture is a new one without metadata, upright, with a small copy', async () => {
    const sent = await phonePhoto(6);
    expect(sent.includes('Isolde')).toBe(true);
    const browser = freshBrowser();
    const answer = await send(sent, 'IMG_0001.JPG', { browser });
    if (!answer.ok) throw new Error(answer.problem.message);
    const row = await findUpload(setting.services, null, browser, answer.value.id);
    if (!row.ok) throw new Error(row.problem.message);
    for (const key of [row.value.storageKey, row.value.thumbKey!]) {
      const bytes = readFileSync(join(setting.services.config.uploadsFolder, key));
      const meta = await sharp(bytes).metadata();
      expect(meta).toMatchObject({ format: 'webp', width: 300, height: 400 });
      for (const part of [meta.exif, meta.xmp, meta.iptc, meta.orientation]) expect(part).toBeUndefined();
      for (const secret of ['Isolde', 'Quayside', 'Kitchen', 'GPS', 'Exif']) expect(bytes.includes(secret)).toBe(false);
    }
    const kept = readFileSync(join(setting.services.config.uploadsFolder, row.value.storageKey));
    expect([row.value.bytes, row.value.sha256]).toEqual([kept.length, createHash('sha256').update(kept).digest('hex')]);
    expect(uploadPath(row.value, 'file')).toBe(`uploads/${row.value.storageKey}`);
  });

  it('of a 3D file is what was sent, with the measure that the casting core gives', async () => {
    const browser = freshBrowser();
    for (const body of [stl, stlText]) {
      const answer = await send(body, 'block.stl', { browser });
      if (!answer.ok) throw new Error(answer.problem.message);
      const own = readStl(body);
      if (!own.ok) throw new Error('the block could not be read');
      expect(answer.value.measure).toEqual(own.measure);
      // A block of 60 x 40 x 20 mm is 48,000 mm3; its surface 8,800 mm2.
      expect(answer.value.measure!.volumeMm3).toBeCloseTo(48_000, 3);
      const row = await findUpload(setting.services, null, browser, answer.value.id);
      if (!row.ok) throw new Error(row.problem.message);
      expect(readFileSync(join(setting.services.config.uploadsFolder, row.value.storageKey)).equals(body)).toBe(true);
    }
  });

  it('is one row and one file for one id, however often it is sent', async () => {
    const browser = freshBrowser();
    const id = clientId();
    const before = stored().length;
    const answers = await Promise.all(Array.from({ length: 8 }, () => send(stl, 'block.stl', { id, browser })));
    for (const answer of answers) expect(answer).toEqual(answers[0]);
    expect(await send(stl, 'block.stl', { id, browser })).toEqual(answers[0]);
    expect(stored().length).toBe(before + 1);
    expect(await listUnusedUploads(setting.services, browser)).toHaveLength(1);
    const other = await send(stl, 'block.stl', { id, browser: freshBrowser() });
    expect(other.ok && answers[0]!.ok && other.value.id !== answers[0]!.value.id).toBe(true);
  });
});

describe('a name', () => {
  it.each([
    ['../../../etc/passwd', 'passwd'],
    ['C:\\fakepath\\blade.stl', 'blade.stl'],
    ['blade\u0000.stl', 'blade.stl'],
    ['bla\u202Elts.exe', 'blalts.exe'],
    ['line\r\nbreak\t.stl', 'linebreak.stl'],
    ['zero\u200Bwidth\uFEFF.stl', 'zerowidth.stl'],
    ['cafe\u0301.stl', 'caf\u00e9.stl'],
    ['schwert für Küche.stl', 'schwert für Küche.stl'],
    ['青銅剣.stl', '青銅剣.stl'],
    ['   ', 'file'],
    ['/', 'file'],
    ['', 'file'],
    [`lone\uD800.stl`, 'lone\uFFFD.stl'],
  ])('%j is shown as %j', (given, shown) => expect(displayName(given)).toBe(shown));

  it('too long is cut between letters, never within one', () => {
    const name = displayName('🗡'.repeat(300));
    expect([...name]).toHaveLength(120);
    expect(name.isWellFormed()).toBe(true);
  });
});

describe('whose file it is', () => {
  it('before an enquiry, the browser’s that sent it alone', async () => {
    const { services, owner, customer, maker } = setting;
    const browser = freshBrowser();
    const answer = await send(stl, 'block.stl', { browser });
    const id = answer.ok ? answer.value.id : '';
    expect(codeOf(await findUpload(services, null, browser, id))).toBe('ok');
    for (const actor of [owner, customer, maker, null]) {
      expect(codeOf(await findUpload(services, actor, freshBrowser(), id))).toBe('not-found');
      expect(codeOf(await removeUpload(services, freshBrowser(), id))).toBe('not-found');
    }
    for (const wrong of ['', 'x', '-'.repeat(36), undefined]) {
      expect(codeOf(await findUpload(services, owner, browser, wrong))).toBe('not-found');
    }
    const before = stored().length;
    expect(codeOf(await removeUpload(services, browser, id))).toBe('ok');
    expect(stored().length).toBe(before - 1);
    expect(codeOf(await removeUpload(services, browser, id))).toBe('not-found');
  });

  it('with an enquiry, its customer’s and the owner’s, and it stays', async () => {
    const { services, owner, customer, other, maker, bookkeeper } = setting;
    const answer = await send(stl, 'block.stl', { browser: SENDER.browserId });
    const id = answer.ok ? answer.value.id : '';
    await newEnquiry(setting, { uploads: [id] });
    for (const actor of [owner, customer])
      expect(codeOf(await findUpload(services, actor, freshBrowser(), id))).toBe('ok');
    for (const actor of [other, maker, bookkeeper, null]) {
      expect(codeOf(await findUpload(services, actor, SENDER.browserId, id))).toBe('not-found');
    }
    expect(codeOf(await removeUpload(services, SENDER.browserId, id))).toBe('not-found');
    expect(await services.db.select().from(uploads).where(eq(uploads.id, id))).toHaveLength(1);
  });

  it('is never a maker’s or a bookkeeper’s to send, and a browser holds only so many unused', async () => {
    const { services, maker, bookkeeper } = setting;
    for (const actor of [maker, bookkeeper]) {
      const refused = await receiveUpload(services, actor, 'b', formRequest(stl, 'a.stl', { clientId: clientId() }));
      expect(codeOf(refused)).toBe('not-allowed');
    }
    const browser = freshBrowser();
    for (let each = 0; each < 40; each += 1) expect(codeOf(await send(obj, 'a.obj', { browser }))).toBe('ok');
    expect(await send(obj, 'a.obj', { browser })).toMatchObject({
      problem: { code: 'too-many', message: expect.stringContaining('40') },
    });
  });
});
