import { pino, stdSerializers, type DestinationStream, type Logger } from 'pino';

/** A JSON log to standard output. Secrets, links, codes and addresses are never written. */
export function createLog(level: string, destination?: DestinationStream): Logger {
  const options = {
    level,
    redact: {
      paths: ['*.email', '*.to', '*.token', '*.code', '*.authorization', '*.cookie', 'req.headers', 'err.config'],
      censor: '[kept out of the log]',
    },
    serializers: { err: withoutValues },
  };
  return destination ? pino(options, destination) : pino(options);
}

/**
 * An error without the values it was about: Drizzle ends its message with the statement's parameters, and PostgreSQL
 * quotes the offending row in `detail`; either may hold an address, a link or a code.
 */
function withoutValues(error: Error): object {
  const { params: _params, detail: _detail, where: _where, ...plain } = stdSerializers.err(error);
  const told = parametersTold(error);
  const cut = (text: string) => told.reduce((rest, words) => rest.replaceAll(words, ''), text);
  return { ...plain, message: cut(plain.message), stack: cut(plain.stack) };
}

/** The ends of the messages in which Drizzle tells a statement's parameters, down the chain of causes. */
function parametersTold(error: unknown): string[] {
  if (!(error instanceof Error)) return [];
  const own = 'params' in error ? [`\nparams: ${String(error.params)}`] : [];
  return [...own, ...parametersTold(error.cause)];
}
