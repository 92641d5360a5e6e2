import compression from 'compression';
import {
  createServer,
  type IncomingMessage,
  type OutgoingHttpHeaders,
  type Server,
  type ServerResponse,
} from 'node:http';
import type { Logger } from 'pino';
import type { Config } from '../../server/config';
import { FILE_HEADER } from '../../server/file-response';
import { allowanceFor, refuseBody, watchSender } from './body-limit';
import { deliverFile, interceptAnswer } from './deliver-file';
import { knownHosts, normaliseForwarding } from './proxy';
import { logRequest } from './request-log';
import { refuseByAddress, type Refusal } from './request-rules';
import { commonHeaders, contentPolicy, framingPolicy, staticPolicy } from './security-headers';
import { loadStaticFiles } from './static-files';

/** Astro's built server in middleware mode; it calls `next` for a path that is no page. */
export type PageHandler = (req: IncomingMessage, res: ServerResponse, next: () => void) => unknown;

export interface FrontServer {
  server: Server;
  /** Takes no new requests, lets running ones finish for at most `patience` milliseconds, then closes. */
  drain: (patience: number) => Promise<void>;
}

/**
 * The web server that faces people: checks each request's address and size, answers built pages from
 * memory, hands the rest to Astro and puts the security headers on every answer.
 */
export function createFrontServer(config: Config, log: Logger, staticFolder: string, pages: PageHandler): FrontServer {
  const hosts = knownHosts(config);
  const common = commonHeaders(config);
  const framing = framingPolicy(config);
  const compress = compression({ filter: (req, res) => !isStream(res) && compression.filter(req, res) });
  const streams = new Set<ServerResponse>();
  const withPolicy = (type: string, own?: string): OutgoingHttpHeaders => ({
    ...common,
    'content-security-policy': contentPolicy(own, type, framing),
  });
  const answerStatic = loadStaticFiles(staticFolder, (type, body) => ({
    ...common,
    'content-security-policy': staticPolicy(type, body, framing),
  }));

  function passToPages(req: IncomingMessage, res: ServerResponse, path: string): void {
    logRequest(req, res, log);
    normaliseForwarding(req, config);
    watchSender(req, allowanceFor(path, req.headers['content-type']));
    compress(req as never, res as never, () => undefined);
    interceptAnswer(
      res,
      (_status, headers) => {
        const type = String(headers['content-type'] ?? '');
        if (type.startsWith(EVENT_STREAM)) keepUntilClosed(streams, res);
        if (type === 'text/html') headers['content-type'] = 'text/html; charset=utf-8';
        return { ...headers, ...withPolicy(type, headers['content-security-policy'] as string | undefined) };
      },
      FILE_HEADER,
      (file) => deliverFile(req, res, config.dataFolder, file, (err) => log.warn({ err }, 'a file was not delivered')),
    );
    const refuseUnknown = () => refuse(res, nothingHere, withPolicy('application/json'));
    void pages(req, res, () => {
      if (!isRead(req) || path.startsWith('/api/')) return refuseUnknown();
      // In middleware mode Astro leaves an unknown address to us; its page for that answers under its own address only.
      req.url = '/404';
      void pages(req, res, refuseUnknown);
    });
  }

  const server = createServer((req, res) => {
    const refusal = refuseByAddress(req, hosts);
    const path = (req.url ?? '').split('?', 1)[0]!;
    if (refusal) return refuse(res, refusal, withPolicy('text/plain'));
    if (answerStatic(req, res, path)) return;
    const tooMuch = refuseBody(req, allowanceFor(path, req.headers['content-type']));
    if (tooMuch) {
      req.resume();
      return refuse(res, tooMuch, withPolicy('application/json'));
    }
    passToPages(req, res, path);
  });
  limitTimes(server);
  return { server, drain: (patience) => drain(server, streams, patience) };
}

const EVENT_STREAM = 'text/event-stream';

/** News must leave at once; a compressor would hold it back until its block is full. */
function isStream(res: { getHeader(name: string): unknown }): boolean {
  return String(res.getHeader('content-type') ?? '').startsWith(EVENT_STREAM);
}

const nothingHere: Refusal = { status: 404, message: 'There is nothing at this address.' };

function isRead(req: IncomingMessage): boolean {
  return req.method === 'GET' || req.method === 'HEAD';
}

/** Answers in JSON, as the upload page and every API caller expect; a person reads the same sentence. */
function refuse(res: ServerResponse, { status, message }: Refusal, headers: OutgoingHttpHeaders): void {
  const code = {
    400: 'invalid',
    404: 'not-found',
    405: 'invalid',
    408: 'invalid',
    411: 'invalid',
    413: 'too-large',
    421: 'invalid',
  }[status];
  const body = JSON.stringify({ ok: false, problem: { code, message } });
  res.writeHead(status, { ...headers, 'content-type': 'application/json; charset=utf-8', 'cache-control': 'no-store' });
  res.end(body);
}

function keepUntilClosed(streams: Set<ServerResponse>, res: ServerResponse): void {
  streams.add(res);
  res.once('close', () => streams.delete(res));
}

/** Node's own time-outs for heads and idle connections; the longest body allowed sets the third. */
function limitTimes(server: Server): void {
  server.headersTimeout = 15_000;
  server.keepAliveTimeout = 65_000;
  server.requestTimeout = 41 * 60_000;
  server.maxHeadersCount = 100;
}

async function drain(server: Server, streams: Set<ServerResponse>, patience: number): Promise<void> {
  const closed = new Promise<void>((resolve) => server.close(() => resolve()));
  // A connection whose answer is finished is idle from then on; nobody else would close it.
  const sweep = setInterval(() => server.closeIdleConnections(), 50);
  // A page that listens for news connects again by itself, to the next server.
  for (const stream of streams) stream.destroy();
  const timer = setTimeout(() => server.closeAllConnections(), patience);
  await closed;
  clearTimeout(timer);
  clearInterval(sweep);
}
