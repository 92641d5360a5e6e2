import { customAlphabet } from 'nanoid';
import type { Logger } from 'pino';

/** Without letters and figures that are read as one another. */
const newFaultId = customAlphabet('23456789ABCDEFGHJKMNPQRSTUVWXYZ', 8);
const NOTED = new WeakMap<Error, string>();

/**
 * Logs a fault of ours once and returns the id it is logged under, which the visitor is shown as well.
 * The same error gives the same id again.
 */
export function noteFault(log: Logger, thrown: unknown, where: string): string {
  const error = thrown instanceof Error ? thrown : new Error(String(thrown));
  const known = NOTED.get(error);
  if (known) return known;
  const fault = newFaultId();
  NOTED.set(error, fault);
  log.error({ err: error, fault, where }, 'a request failed');
  return fault;
}

/** Logs that somebody was turned away from a page, and returns the id they are shown. */
export function noteTurnedAway(log: Logger, status: number, where: string, userId?: string): string {
  const id = newFaultId();
  log.info({ fault: id, status, where, userId }, 'turned away');
  return id;
}
