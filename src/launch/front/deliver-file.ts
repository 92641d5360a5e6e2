import type { IncomingMessage, OutgoingHttpHeaders, ServerResponse } from 'node:http';
import { join } from 'node:path';
import send from 'send';

/**
 * Streams a stored file as the answer, with ranges, conditional requests and at the reader's pace.
 * The headers already set on `res` stay.
 *
 * @param path what `fileResponse` put in the header: a path that begins with `uploads/`, percent-encoded
 * @param folder the data folder
 */
export function deliverFile(
  req: IncomingMessage,
  res: ServerResponse,
  folder: string,
  path: string,
  onError: (error: Error) => void,
): void {
  const [room, ...parts] = decodeURIComponent(path).split('/');
  const fail = (error: Error & { status?: number }) => {
    onError(error);
    answerMissing(res, error.status === 416 ? 416 : 404);
  };
  // The name is relative to `uploads/`, which `send` never leaves; any other folder holds secrets.
  if (room !== 'uploads') return fail(new Error(`a file outside the uploads was named: ${path}`));
  const stream = send(req, encodeURIComponent(parts.join('/')), {
    root: join(folder, 'uploads'),
    index: false,
    cacheControl: false,
    dotfiles: 'deny',
  });
  stream.on('error', fail);
  stream.on('directory', () => fail(new Error(`a folder was named: ${path}`)));
  stream.pipe(res);
}

function answerMissing(res: ServerResponse, status: 404 | 416): void {
  if (res.headersSent) {
    res.destroy();
    return;
  }
  for (const name of ['content-type', 'content-disposition', 'content-security-policy']) res.removeHeader(name);
  res.statusCode = status;
  res.setHeader('content-type', 'text/plain; charset=utf-8');
  res.end(status === 416 ? 'The file has no such range.\n' : 'This file is no longer here.\n');
}

/** Sees the status and headers of an answer just before they are sent, and gives back those to send. */
export type HeadHook = (status: number, headers: OutgoingHttpHeaders) => OutgoingHttpHeaders;

/**
 * Stands between Astro and the socket: every head passes `hook`, and an answer that names a stored
 * file by `fileHeader` is sent from disk instead of from the page's (empty) body.
 */
export function interceptAnswer(
  res: ServerResponse,
  hook: HeadHook,
  fileHeader: string,
  deliver: (path: string) => void,
): void {
  const writeHead = res.writeHead.bind(res);
  const end = res.end.bind(res);
  const intercepted = (status: number, ...rest: unknown[]): ServerResponse => {
    const given = rest.find((part) => typeof part === 'object' && part !== null);
    const headers = hook(status, { ...res.getHeaders(), ...(given as OutgoingHttpHeaders | undefined) });
    const file = headers[fileHeader];
    Reflect.set(res, 'writeHead', writeHead);
    if (typeof file !== 'string') return writeHead(status, headers);
    for (const [name, value] of Object.entries(headers)) {
      if (name !== fileHeader && value !== undefined) res.setHeader(name, value);
    }
    res.statusCode = status;
    Reflect.set(res, 'end', () => {
      Reflect.set(res, 'end', end);
      deliver(file);
      return res;
    });
    return res;
  };
  Reflect.set(res, 'writeHead', intercepted);
}
