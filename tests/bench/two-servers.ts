import { readFileSync } from 'node:fs';
import { createServer } from 'node:http';
import { createFrontServer } from '../../src/launch/front/front-server';
import { readConfig } from '../../src/server/config';
import { createLog } from '../../src/server/log';

/** Child of the bench: the front server on PORT and, on the next port, the barest server with the same page. */
const config = readConfig();
const page = readFileSync('dist/client/index.html');
const front = createFrontServer(config, createLog('silent'), 'dist/client', (_req, _res, next) => next());
const bare = createServer((_req, res) => {
  res.writeHead(200, { 'content-type': 'text/html; charset=utf-8', 'content-length': page.length });
  res.end(page);
});
front.server.listen(config.port, '127.0.0.1');
bare.listen(config.port + 1, '127.0.0.1', () => process.send?.('ready'));
// Asked before and after each measurement: the processor time this process has used, in microseconds.
process.on('message', () => {
  const { user, system } = process.cpuUsage();
  process.send?.(user + system);
});
