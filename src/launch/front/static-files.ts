import { createHash } from 'node:crypto';
import { readdirSync, readFileSync } from 'node:fs';
import type { IncomingMessage, OutgoingHttpHeaders, ServerResponse } from 'node:http';
import { extname, join, relative, sep } from 'node:path';
import { brotliCompressSync, constants, gzipSync } from 'node:zlib';

const TYPES: Record<string, string> = {
  '.html': 'text/html; charset=utf-8',
  '.css': 'text/css; charset=utf-8',
  '.js': 'text/javascript; charset=utf-8',
  '.json': 'application/json; charset=utf-8',
  '.txt': 'text/plain; charset=utf-8',
  '.xml': 'application/xml; charset=utf-8',
  '.svg': 'image/svg+xml',
  '.png': 'image/png',
  '.jpg': 'image/jpeg',
  '.webp': 'image/webp',
  '.ico': 'image/x-icon',
  '.woff2': 'font/woff2',
  '.woff': 'font/woff',
  '.pdf': 'application/pdf',
  '.webmanifest': 'application/manifest+json',
};

type Encoding = 'br' | 'gzip' | 'identity';

interface Variant {
  body: Buffer;
  headers: OutgoingHttpHeaders;
}

interface StaticFile {
  body: Buffer;
  etag: string;
  headers: OutgoingHttpHeaders;
  compressible: boolean;
  variants: Partial<Record<Encoding, Variant>>;
}

type PageHeaders = (type: string, body: Buffer) => OutgoingHttpHeaders;

/** Answers from memory with a built page or asset, which can only be read; false when there is none at this path. */
export type StaticFiles = (req: IncomingMessage, res: ServerResponse, path: string) => boolean;

/**
 * Reads the built site into memory. Each file is compressed once, when first asked for.
 *
 * @param folder `dist/client`
 * @param pageHeaders gives the headers of a file from its media type and content
 */
export function loadStaticFiles(folder: string, pageHeaders: PageHeaders): StaticFiles {
  const files = new Map<string, StaticFile>();
  for (const entry of readdirSync(folder, { recursive: true, withFileTypes: true })) {
    if (!entry.isFile()) continue;
    const path = `/${relative(folder, join(entry.parentPath, entry.name)).split(sep).join('/')}`;
    const file = readStaticFile(join(entry.parentPath, entry.name), path, pageHeaders);
    files.set(path, file);
    if (path.endsWith('/index.html')) files.set(path.slice(0, -'/index.html'.length) || '/', file);
  }
  return (req, res, path) => {
    const file = files.get(path) ?? files.get(plainSpelling(path));
    if (!file) return false;
    if (req.method === 'GET' || req.method === 'HEAD') sendStatic(req, res, file);
    else refuseToChange(req, res, file);
    return true;
  };
}

function plainSpelling(path: string): string {
  const decoded = path.includes('%') ? decodeURIComponent(path) : path;
  return decoded.length > 1 && decoded.endsWith('/') ? decoded.slice(0, -1) : decoded;
}

function readStaticFile(file: string, path: string, pageHeaders: PageHeaders): StaticFile {
  const body = readFileSync(file);
  const type = TYPES[extname(file)] ?? 'application/octet-stream';
  const etag = `"${createHash('sha256').update(body).digest('base64url').slice(0, 22)}"`;
  // Names under /_astro/ hold a hash of the content, so a copy stays right for ever.
  const cache = path.startsWith('/_astro/') ? 'public, max-age=31536000, immutable' : 'no-cache';
  const headers = {
    ...pageHeaders(type, body),
    'content-type': type,
    etag,
    'cache-control': cache,
    vary: 'accept-encoding',
  };
  const compressible = /^text\/|javascript|json|xml|manifest/.test(type) && body.length > 1_000;
  return { body, etag, headers, compressible, variants: {} };
}

function refuseToChange(req: IncomingMessage, res: ServerResponse, file: StaticFile): void {
  req.resume();
  const headers = { 'content-type': 'text/plain; charset=utf-8', 'cache-control': 'no-store', allow: 'GET, HEAD' };
  res.writeHead(405, { ...file.headers, ...headers });
  res.end('This address can only be read.\n');
}

function sendStatic(req: IncomingMessage, res: ServerResponse, file: StaticFile): void {
  if (req.headers['if-none-match']?.includes(file.etag)) {
    res.writeHead(304, file.headers);
    res.end();
    return;
  }
  const { body, headers } = variantFor(file, req.headers['accept-encoding']);
  res.writeHead(200, headers);
  res.end(req.method === 'HEAD' ? undefined : body);
}

function variantFor(file: StaticFile, accepted: string | string[] | undefined): Variant {
  const offer = String(accepted ?? '');
  const encoding = !file.compressible
    ? 'identity'
    : offer.includes('br')
      ? 'br'
      : offer.includes('gzip')
        ? 'gzip'
        : 'identity';
  return (file.variants[encoding] ??= encode(file, encoding));
}

function encode(file: StaticFile, encoding: Encoding): Variant {
  const body = {
    br: () => brotliCompressSync(file.body, { params: { [constants.BROTLI_PARAM_QUALITY]: 9 } }),
    gzip: () => gzipSync(file.body, { level: 9 }),
    identity: () => file.body,
  }[encoding]();
  const coded = encoding === 'identity' ? {} : { 'content-encoding': encoding };
  return { body, headers: { ...file.headers, ...coded, 'content-length': body.length } };
}
