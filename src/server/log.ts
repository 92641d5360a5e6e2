import { pino, type Logger } from 'pino';

/** A JSON log to standard output. Secrets, links, codes and addresses are never written. */
export function createLog(level: string): Logger {
  return pino({
    level,
    redact: {
      paths: ['*.email', '*.to', '*.token', '*.code', '*.authorization', '*.cookie', 'req.headers', 'err.config'],
      censor: '[kept out of the log]',
    },
  });
}
