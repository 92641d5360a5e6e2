import { randomUUID } from 'node:crypto';
import type { IncomingMessage, ServerResponse } from 'node:http';
import type { Logger } from 'pino';

const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/;

/** A path fit for a log: no query, and no long segment that could be a token. */
export function loggablePath(target: string): string {
  const [path = ''] = target.split('?');
  return path
    .split('/')
    .map((part) => (part.length > 24 && !UUID.test(part) ? '…' : part))
    .join('/');
}

/** Gives the request an id, in its own headers and in the answer's, and logs one line when it is over. */
export function logRequest(req: IncomingMessage, res: ServerResponse, log: Logger): void {
  const id = randomUUID();
  const begun = performance.now();
  // Astro rewrites the address of a request it turns away.
  const path = loggablePath(req.url ?? '');
  req.headers['x-request-id'] = id;
  res.setHeader('x-request-id', id);
  res.once('close', () => {
    const line = {
      id,
      method: req.method,
      path,
      status: res.statusCode,
      ms: Math.round(performance.now() - begun),
      ...(!res.writableFinished && { cut: true }),
    };
    if (res.statusCode >= 500) log.error(line, 'request failed');
    else log.info(line, 'request');
  });
}
