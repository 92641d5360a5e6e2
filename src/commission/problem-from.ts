import type { z } from 'zod';
import type { Problem } from './problem';

/** Turns a schema's complaints into one problem, a sentence per field. */
export function problemFrom(error: z.ZodError): Problem {
  const fields: Record<string, string> = {};
  for (const issue of error.issues) {
    const name = issue.path.join('.') || 'form';
    fields[name] ??= issue.message;
  }
  const count = Object.keys(fields).length;
  const message =
    count === 1 ? Object.values(fields)[0]! : `${count} entries need another look. Each says why beside it.`;
  return { code: 'invalid', message, fields };
}
