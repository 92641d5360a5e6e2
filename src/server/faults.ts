import { customAlphabet } from 'nanoid';
import type { Logger } from 'pino';

/** Without letters and figures that are read as one another. */
const newFaultId = customAlphabet('23456789ABCDEFGHJKMNPQRSTUVWXYZ', 8);

/** A fault that is logged already. It may be printed anywhere: it says nothing but its id. */
export class NotedFault extends Error {
  override readonly name = 'NotedFault';

  constructor(readonly fault: string) {
    super(`fault ${fault}, logged above`);
  }
}

/** Logs a fault of ours and returns the id it is logged under, which the visitor is shown as well. */
export function noteFault(log: Logger, thrown: unknown, where: string): string {
  if (thrown instanceof NotedFault) return thrown.fault;
  const error = thrown instanceof Error ? thrown : new Error(String(thrown));
  const fault = newFaultId();
  log.error({ err: error, fault, where }, 'a request failed');
  return fault;
}

/** Logs that somebody was turned away from a page, and returns the id they are shown. */
export function noteTurnedAway(log: Logger, status: number, where: string, userId?: string): string {
  const id = newFaultId();
  log.info({ fault: id, status, where, userId }, 'turned away');
  return id;
}
