import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import type { FakeRequest, Handle } from './message';

const LOOPBACK = '127.0.0.1';
const LARGEST_BODY_BYTES = 60 * 1024 * 1024;
const OWN_HOSTS = /^(127\.0\.0\.1|localhost|\[::1\])(:\d+)?$/;

export type Listener = { port: number; url: string; close: () => Promise<void> };

/**
 * Serves a fake on 127.0.0.1 and nowhere else. Port 0 takes any free one.
 * @throws Error with a plain sentence when the port is taken or not allowed.
 */
export async function listen(handle: Handle, port: number): Promise<Listener> {
  const server = createServer((incoming, outgoing) => {
    answer(handle, incoming, outgoing).catch((error: unknown) => {
      console.error('The fake could not answer', incoming.method, incoming.url, error);
      if (!outgoing.headersSent) outgoing.writeHead(500, { 'content-type': 'text/plain; charset=utf-8' });
      outgoing.end('The fake could not answer; the reason is in its log.');
    });
  });
  await bind(server, port);
  const bound = (server.address() as AddressInfo).port;
  return { port: bound, url: `http://${LOOPBACK}:${bound}`, close: () => shut(server) };
}

function bind(server: Server, port: number): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once('error', (error: NodeJS.ErrnoException) => {
      const why = error.code === 'EADDRINUSE' ? 'another program is using it' : error.message;
      reject(new Error(`Port ${port} on ${LOOPBACK} cannot be opened: ${why}. Choose another port.`));
    });
    server.listen(port, LOOPBACK, resolve);
  });
}

/** Stops taking requests, lets those under way finish for a second, then cuts them. */
function shut(server: Server): Promise<void> {
  return new Promise((resolve) => {
    const cut = setTimeout(() => server.closeAllConnections(), 1000);
    server.close(() => {
      clearTimeout(cut);
      resolve();
    });
    server.closeIdleConnections();
  });
}

async function answer(handle: Handle, incoming: IncomingMessage, outgoing: ServerResponse): Promise<void> {
  const refusal = foreign(incoming);
  if (refusal) {
    outgoing.writeHead(403, { 'content-type': 'text/plain; charset=utf-8' }).end(refusal);
    return;
  }
  const request = await receive(incoming);
  if (!request) {
    outgoing.writeHead(413, { 'content-type': 'text/plain; charset=utf-8' }).end('The request is larger than 60 MB.');
    return;
  }
  const result = await handle(request);
  if (result.lost) {
    outgoing.destroy();
    return;
  }
  outgoing.writeHead(result.status, result.headers).end(request.method === 'HEAD' ? undefined : result.body);
}

/** Refuses what a page from elsewhere could send through this machine's browser: other host names, other origins. */
function foreign(incoming: IncomingMessage): string | null {
  const host = incoming.headers.host ?? '';
  if (!OWN_HOSTS.test(host)) return `This fake answers on ${LOOPBACK} only, not under the name "${host}".`;
  const origin = incoming.headers.origin;
  const reads = incoming.method === 'GET' || incoming.method === 'HEAD';
  if (!reads && origin && origin !== `http://${host}`) return 'A form of another site cannot be posted here.';
  return null;
}

async function receive(incoming: IncomingMessage): Promise<FakeRequest | null> {
  const chunks: Buffer[] = [];
  let size = 0;
  for await (const chunk of incoming as AsyncIterable<Buffer>) {
    size += chunk.length;
    if (size > LARGEST_BODY_BYTES) return null;
    chunks.push(chunk);
  }
  const headers: Record<string, string> = {};
  for (const [name, value] of Object.entries(incoming.headers)) {
    if (value !== undefined) headers[name] = Array.isArray(value) ? value.join(', ') : value;
  }
  return {
    method: incoming.method ?? 'GET',
    url: new URL(incoming.url ?? '/', `http://${incoming.headers.host ?? LOOPBACK}`),
    headers,
    body: Buffer.concat(chunks).toString('utf8'),
  };
}
