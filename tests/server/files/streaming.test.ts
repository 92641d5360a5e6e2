// Issue section 5: up to 200 MB, streamed to disk, never held in memory. Reliability plan row 17 and pitfalls on uploads.
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { readMultipart } from '../../../src/server/storage/multipart';
import { codeOf } from '../deal/deal-setting';
import { filesIn, formRequest, streamedRequest } from '../../factories/files';

const KB = 1024;
const MB = 1024 * KB;
let folder = '';
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'pourwright-stream-'));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const limit = (bytes: number) => ({ bytes, words: `${bytes} bytes` });

function onDisk(): number {
  return filesIn(folder).reduce((sum, name) => sum + statSync(join(folder, name)).size, 0);
}

describe('a large file', () => {
  it('of 100 MB is on the disk as it comes: what was read and not yet written never grows with the file', async () => {
    const chunk = Buffer.alloc(64 * KB, 'a');
    let sent = 0;
    let mostWaiting = 0;
    async function* chunks() {
      while (sent < 100 * MB) {
        yield chunk;
        sent += chunk.length;
        mostWaiting = Math.max(mostWaiting, sent - onDisk());
      }
    }
    const read = await readMultipart(streamedRequest(chunks()), folder, limit(200 * MB));
    expect(read).toMatchObject({ ok: true, value: { file: { bytes: 100 * MB, name: 'blade.stl' } } });
    expect(mostWaiting).toBeLessThan(2 * MB);
    expect(onDisk()).toBe(100 * MB);
  }, 120_000);

  it('over the limit is refused with its sentence; not a byte beyond the limit was written, and none is left', async () => {
    let most = 0;
    async function* chunks() {
      for (let each = 0; each < 64; each += 1) {
        yield Buffer.alloc(64 * KB, 'a');
        most = Math.max(most, onDisk());
      }
    }
    const read = await readMultipart(streamedRequest(chunks()), folder, limit(MB));
    expect(read).toMatchObject({
      ok: false,
      problem: { code: 'too-large', message: expect.stringContaining('larger than') },
    });
    expect(most).toBeGreaterThan(0);
    expect(most).toBeLessThanOrEqual(MB);
    expect(filesIn(folder)).toEqual([]);
  });

  it('of exactly the limit is taken', async () => {
    const read = await readMultipart(streamedRequest([Buffer.alloc(MB, 'a')]), folder, limit(MB + 1));
    expect(read).toMatchObject({ ok: true, value: { file: { bytes: MB } } });
  });
});

describe('a sending that breaks off leaves nothing', () => {
  it('when the sender hangs up', async () => {
    async function* chunks() {
      yield Buffer.alloc(300 * KB, 'a');
      await new Promise((resolve) => setImmediate(resolve));
      throw new Error('the line is dead');
    }
    const read = await readMultipart(streamedRequest(chunks()), folder, limit(MB));
    expect(read).toMatchObject({
      ok: false,
      problem: { code: 'invalid', message: expect.stringContaining('did not arrive whole') },
    });
    expect(filesIn(folder)).toEqual([]);
  });

  it('when the body ends within the file', async () => {
    const read = await readMultipart(
      streamedRequest([Buffer.alloc(300 * KB, 'a')], { whole: false }),
      folder,
      limit(MB),
    );
    expect(codeOf(read)).toBe('invalid');
    expect(filesIn(folder)).toEqual([]);
  });

  it('when the body is cut off before the file, or is no multipart at all', async () => {
    const headers = { 'content-type': 'multipart/form-data; boundary=x' };
    for (const body of ['', '--x\r\nContent-Disposition: form-data; name="fi', 'nothing of the kind', '--x--']) {
      const request = new Request('http://localhost/', { method: 'POST', body, headers });
      const read = await readMultipart(request, folder, limit(MB));
      expect(read.ok ? read.value.file : null, JSON.stringify(body)).toBeNull();
    }
    expect(filesIn(folder)).toEqual([]);
  });

  it('when the folder cannot be made, which is a fault of ours', async () => {
    // A file where the folder should be: also the system's administrator cannot write below it.
    const read = readMultipart(
      streamedRequest([Buffer.alloc(300 * KB, 'a')]),
      join(process.execPath, 'below'),
      limit(MB),
    );
    await expect(read).rejects.toMatchObject({ code: 'ENOTDIR' });
  });

  it('when the disk is full in the middle of it, which is a fault of ours', () => {
    // A process that may not write files of more than 50 kB meets an error at its first write beyond, as on a full disk.
    const command = 'trap "" XFSZ; ulimit -f 100; exec "$0" --import tsx tests/server/files/small-disk.ts "$1"';
    const { stdout } = spawnSync('sh', ['-c', command, process.execPath, folder], { encoding: 'utf8' });
    expect(stdout.trim()).toBe('EFBIG');
    expect(filesIn(folder)).toEqual([]);
  }, 60_000);
});

it('only the one file counts; a second, and a file in another field, are let pass', async () => {
  const form = new FormData();
  form.set('other', new File(['x'.repeat(200 * KB)], 'other.stl'));
  form.append('file', new File(['first'], 'a.stl'));
  form.append('file', new File(['second'], 'b.stl'));
  const read = await readMultipart(new Request('http://localhost/', { method: 'POST', body: form }), folder, limit(MB));
  expect(read.ok).toBe(true);
  expect(filesIn(folder).length).toBeLessThanOrEqual(1);
  const plain = await readMultipart(
    formRequest(Buffer.from('x'), 'a.stl', { clientId: 'abcd1234' }),
    folder,
    limit(MB),
  );
  expect(plain).toMatchObject({ ok: true, value: { fields: { clientId: 'abcd1234' }, file: { bytes: 1 } } });
});
