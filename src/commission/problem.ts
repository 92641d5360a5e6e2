/**
 * An expected refusal. `code` is permanent and machine-readable; `message` says what happened, why,
 * and what to do; `fields` maps an input's name to its own sentence.
 */
export interface Problem {
  code: ProblemCode;
  message: string;
  fields?: Record<string, string>;
}

/** The kinds of refusal; doors map each to one HTTP status. */
export type ProblemCode =
  | 'invalid'
  | 'sign-in-needed'
  | 'not-allowed'
  | 'not-found'
  | 'conflict'
  | 'stale'
  | 'too-many'
  | 'too-large'
  | 'unsupported'
  | 'unavailable';

/** What every server function returns: its value, or a problem. */
export type Outcome<T> = { ok: true; value: T } | { ok: false; problem: Problem };

/** Wraps a value. */
export function done<T>(value: T): { ok: true; value: T } {
  return { ok: true, value };
}

/** Makes a refusal. */
export function refuse(
  code: ProblemCode,
  message: string,
  fields?: Record<string, string>,
): { ok: false; problem: Problem } {
  return { ok: false, problem: fields ? { code, message, fields } : { code, message } };
}
