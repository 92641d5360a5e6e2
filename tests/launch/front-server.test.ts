import { once } from 'node:events';
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { request, type IncomingMessage } from 'node:http';
import { connect } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { brotliDecompressSync } from 'node:zlib';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createFrontServer, type FrontServer, type PageHandler } from '../../src/launch/front/front-server';
import { freeBasePort } from '../../src/launch/ports';
import { readConfig } from '../../src/server/config';
import { FILE_HEADER } from '../../src/server/file-response';
import { createLog } from '../../src/server/log';

const OWN_POLICY = "default-src 'self'; script-src 'self' 'sha256-x='; object-src 'none'; base-uri 'none';";
const page = `<!doctype html><meta http-equiv="content-security-policy" content="${OWN_POLICY}"><title>Forms</title>${'<p>Bronze for the hand.</p>'.repeat(200)}`;
const stored = Buffer.from(Array.from({ length: 300_000 }, (_, index) => index % 251));

const named: Record<string, string> = {
  '/api/file': 'uploads/ab/piece.stl',
  '/api/outside': 'uploads/../database-password',
  '/api/beside': 'database-password',
};

/** Stands in for Astro's built server: answers as its pages and endpoints do. */
const pages: PageHandler = (req, res, next) => {
  const path = req.url!.split('?')[0];
  if (path === '/studio') {
    res.writeHead(200, {
      'content-type': 'text/html',
      'content-security-policy': "default-src 'self'; script-src 'self';",
    });
    res.end(page);
  } else if (path && path in named) {
    const name = named[path]!;
    res.writeHead(200, { 'content-type': 'model/stl', [FILE_HEADER]: encodeURIComponent(name) });
    res.end();
  } else if (path === '/api/events') {
    res.writeHead(200, { 'content-type': 'text/event-stream' });
    res.write('data: poured\n\n');
  } else if (path === '/api/who') {
    res.writeHead(200, { 'content-type': 'application/json' });
    res.end(JSON.stringify({ address: req.headers['x-forwarded-for'], host: req.headers['x-forwarded-host'] ?? null }));
  } else if (path === '/404') {
    res.writeHead(404, { 'content-type': 'text/html' }).end('<title>Nothing here</title>');
  } else if (path === '/api/slow') {
    setTimeout(() => res.writeHead(200, { 'content-type': 'text/plain' }).end('done'), 300);
  } else if (path?.startsWith('/api/')) {
    req.resume().on('end', () => res.writeHead(200, { 'content-type': 'application/json' }).end('{"ok":true}'));
  } else next();
};

let folder: string;
let port: number;
let front: FrontServer;

interface Answer {
  status: number;
  headers: IncomingMessage['headers'];
  body: Buffer;
}

async function ask(path: string, options: { method?: string; headers?: Record<string, string>; body?: Buffer } = {}) {
  const req = request({
    port,
    host: '127.0.0.1',
    path,
    method: options.method ?? 'GET',
    headers: options.headers ?? {},
  });
  req.end(options.body);
  const [res] = (await once(req, 'response')) as [IncomingMessage];
  const chunks: Buffer[] = [];
  for await (const chunk of res) chunks.push(chunk as Buffer);
  return { status: res.statusCode!, headers: res.headers, body: Buffer.concat(chunks) } satisfies Answer;
}

/** Sends bytes as they are and gives back the first line of what is answered. */
async function firstLine(bytes: string): Promise<string> {
  const socket = connect(port, '127.0.0.1');
  socket.write(bytes);
  const [answer] = (await once(socket, 'data')) as [Buffer];
  socket.destroy();
  return answer.toString().split('\r\n', 1)[0]!;
}

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'pourwright-front-'));
  mkdirSync(join(folder, 'site/forms'), { recursive: true });
  mkdirSync(join(folder, 'site/_astro'));
  mkdirSync(join(folder, 'uploads/ab'), { recursive: true });
  writeFileSync(join(folder, 'site/forms/index.html'), page);
  writeFileSync(join(folder, 'site/_astro/a.B1.js'), 'export {};');
  writeFileSync(join(folder, 'uploads/ab/piece.stl'), stored);
  writeFileSync(join(folder, 'database-password'), 'secret');
  port = await freeBasePort();
  const config = readConfig({ PORT: `${port}`, POURWRIGHT_DATA: folder });
  front = createFrontServer(config, createLog('silent'), join(folder, 'site'), pages);
  front.server.listen(port, '127.0.0.1');
  await once(front.server, 'listening');
});

afterAll(async () => {
  await front.drain(1_000);
  rmSync(folder, { recursive: true, force: true });
});

describe('a built page', () => {
  it('is answered with and without a closing slash, compressed, with its security headers', async () => {
    const answer = await ask('/forms/', { headers: { 'accept-encoding': 'br, gzip' } });
    expect(answer.status).toBe(200);
    expect(brotliDecompressSync(answer.body).toString()).toBe(page);
    expect(answer.headers['content-security-policy']).toContain("frame-ancestors 'none'");
    expect(answer.headers['content-security-policy']).toContain(OWN_POLICY);
    expect(answer.headers['x-content-type-options']).toBe('nosniff');
    expect(answer.headers['referrer-policy']).toBe('same-origin');
    expect(answer.headers['permissions-policy']).toContain('camera=(self)');
    expect((await ask('/forms')).body.toString()).toBe(page);
  });

  it('is not sent again to a browser that has it', async () => {
    const { headers } = await ask('/forms');
    const again = await ask('/forms', { headers: { 'if-none-match': headers.etag! } });
    expect([again.status, again.body.length]).toEqual([304, 0]);
  });

  it('keeps what has a hash in its name for ever, and a page never', async () => {
    expect((await ask('/_astro/a.B1.js')).headers['cache-control']).toContain('immutable');
    expect((await ask('/forms')).headers['cache-control']).toBe('no-cache');
  });

  // RFC 9110 section 15.5.6: 405 names the methods there are.
  it.each(['POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS'])('is not changed by a %s', async (method) => {
    for (const path of ['/forms', '/_astro/a.B1.js']) {
      const { status, headers } = await ask(path, { method, headers: { 'content-length': '0' } });
      expect([status, headers.allow]).toEqual([405, 'GET, HEAD']);
    }
  });

  it('that nobody made is answered by the page that says so, and at an endpoint in JSON', async () => {
    const answer = await ask('/nothing');
    expect([answer.status, answer.body.toString()]).toEqual([404, '<title>Nothing here</title>']);
    const endpoint = await ask('/elsewhere', { method: 'POST', headers: { 'content-length': '0' } });
    expect(endpoint.status).toBe(404);
    expect(JSON.parse(endpoint.body.toString()).problem.message).toBe('There is nothing at this address.');
  });
});

describe('a page made at the request', () => {
  it('keeps its own policy and gets the rest of it', async () => {
    const { headers } = await ask('/studio');
    const policy = headers['content-security-policy'];
    expect(policy).toMatch(/^default-src 'self'; script-src 'self'; frame-ancestors 'none'; form-action 'self' http:/);
    expect(policy).toContain(`http://localhost:${port + 1}`);
    expect(headers['content-type']).toBe('text/html; charset=utf-8');
    expect(headers['x-request-id']).toMatch(/^[0-9a-f-]{36}$/);
  });

  it('is compressed', async () => {
    expect((await ask('/studio', { headers: { 'accept-encoding': 'gzip' } })).headers['content-encoding']).toBe('gzip');
  });

  it('that goes on telling news is not compressed, so that each piece leaves at once', async () => {
    const headers = { 'accept-encoding': 'br, gzip' };
    const listening = request({ port, host: '127.0.0.1', path: '/api/events', headers }).end();
    const [events] = (await once(listening, 'response')) as [IncomingMessage];
    expect(events.headers['content-encoding']).toBeUndefined();
    expect(String((await once(events, 'data'))[0])).toBe('data: poured\n\n');
    listening.destroy();
  });

  it('knows the sender by the socket, whatever the sender claims', async () => {
    const headers = { 'x-forwarded-for': '6.6.6.6', 'x-forwarded-host': 'evil.example', forwarded: 'for=6.6.6.6' };
    const answer = await ask('/api/who', { headers });
    expect(JSON.parse(answer.body.toString())).toEqual({ address: '127.0.0.1', host: null });
  });

  it('is not reached under a foreign host name, a foreign spelling or an unknown method', async () => {
    expect((await ask('/studio', { headers: { host: 'evil.example' } })).status).toBe(421);
    for (const path of ['//studio', '/\\studio', '/%2fstudio']) expect((await ask(path)).status).toBe(400);
    expect((await ask('/studio', { method: 'TRACE' })).status).toBe(405);
    expect(await firstLine(`GET /studio HTTP/1.1\r\nHost: localhost:${port}\r\nHost: evil.example\r\n\r\n`)).toMatch(
      / 400 /,
    );
    expect((await ask('/_image?href=/a.png')).status).toBe(404);
  });
});

// OWASP ASVS 5.0, 3.4.3 and 3.4.6: every answer has a policy, with no other base and no frame around it.
it.each(['/forms', '/_astro/a.B1.js', '/studio', '/api/who', '/api/file', '/nothing', '/%2fstudio', '/api/nothing'])(
  'the policy of %s is whole',
  async (path) => {
    const policy = (await ask(path)).headers['content-security-policy'] ?? '';
    expect(policy).toMatch(/frame-ancestors 'none'/);
    expect(policy).toMatch(/default-src '(self|none)'/);
    if (path !== '/studio') expect(policy).toMatch(/base-uri 'none'/);
    expect(policy).not.toMatch(/script-src[^;]*unsafe/);
  },
);

describe('a stored file', () => {
  it('arrives whole, uncompressed and with its length', async () => {
    const answer = await ask('/api/file', { headers: { 'accept-encoding': 'gzip, br' } });
    expect(answer.body.equals(stored)).toBe(true);
    expect(answer.headers['content-length']).toBe(`${stored.length}`);
    expect(answer.headers[FILE_HEADER]).toBeUndefined();
  });

  // RFC 9110 section 14: byte ranges count from 0 and both ends belong to them.
  it('arrives in the range asked for, and says when there is none such', async () => {
    const part = await ask('/api/file', { headers: { range: 'bytes=1000-1999' } });
    expect(part.status).toBe(206);
    expect(part.headers['content-range']).toBe(`bytes 1000-1999/${stored.length}`);
    expect(part.body.equals(stored.subarray(1000, 2000))).toBe(true);
    expect((await ask('/api/file', { headers: { range: 'bytes=900000-' } })).status).toBe(416);
  });

  it('outside the uploads is never sent', async () => {
    for (const path of ['/api/outside', '/api/beside']) {
      const answer = await ask(path);
      expect(answer.status).toBe(404);
      expect(answer.body.toString()).toBe('This file is no longer here.\n');
    }
  });
});

describe('a body', () => {
  it('of the allowed size passes, a larger one and one of untold size do not', async () => {
    const send = (bytes: number, path = '/api/form', type = 'application/json') => {
      const headers = { 'content-length': `${bytes}`, 'content-type': type };
      return ask(path, { method: 'POST', body: Buffer.alloc(bytes), headers });
    };
    expect((await send(1024 * 1024)).status).toBe(200);
    const refused = await send(1024 * 1024 + 1);
    expect(refused.status).toBe(413);
    expect(JSON.parse(refused.body.toString()).problem.message).toContain('1 MB');
    expect((await send(2 * 1024 * 1024, '/api/uploads', 'multipart/form-data; boundary=b')).status).toBe(200);
    expect((await send(2 * 1024 * 1024, '/api/uploads')).status).toBe(413);
    const untold = await ask('/api/form', {
      method: 'POST',
      headers: { 'transfer-encoding': 'chunked' },
      body: Buffer.from('a'),
    });
    expect(untold.status).toBe(411);
  });
});

describe('the end', () => {
  it('lets a running answer finish, ends listening pages and takes nothing new', async () => {
    const own = createFrontServer(
      readConfig({ PORT: `${port + 2}`, POURWRIGHT_DATA: folder }),
      createLog('silent'),
      join(folder, 'site'),
      pages,
    );
    own.server.listen(port + 2, '127.0.0.1');
    await once(own.server, 'listening');
    const listening = request({ port: port + 2, host: '127.0.0.1', path: '/api/events' }).end();
    const [events] = (await once(listening, 'response')) as [IncomingMessage];
    const cut = new Promise((resolve) => events.on('error', resolve).on('close', resolve).resume());
    const running = request({ port: port + 2, host: '127.0.0.1', path: '/api/slow' }).end();
    const answered = once(running, 'response') as Promise<[IncomingMessage]>;
    await once(own.server, 'request');
    await own.drain(5_000);
    await cut;
    expect((await answered)[0].statusCode).toBe(200);
    const late = connect(port + 2, '127.0.0.1');
    const [error] = (await once(late, 'error')) as [NodeJS.ErrnoException];
    expect(error.code).toBe('ECONNREFUSED');
  });
});
