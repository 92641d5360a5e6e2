import type { IncomingMessage, ServerResponse } from 'node:http';
import { readConfig } from '../../server/config';
import { FILE_HEADER } from '../../server/file-response';
import { deliverFile, interceptAnswer } from './deliver-file';

/** Lets `astro dev` send stored files as the front server does, and nothing else of it. */
export function deliverInDevelopment(req: IncomingMessage, res: ServerResponse): void {
  const { dataFolder } = readConfig();
  interceptAnswer(
    res,
    (_status, headers) => headers,
    FILE_HEADER,
    (path) => deliverFile(req, res, dataFolder, path, (error) => console.error(error)),
  );
}
