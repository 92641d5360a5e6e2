import type { DeskFields } from '../../commission/pricing/desk-fields';
import { quoteDraftSchema, type QuoteDraft } from '../../commission/pricing/quote-draft';
import type { Problem } from '../../commission/problem';

/** What came of saving: the new version, or why not. */
export type Saved = { ok: true; version: number; revision: number } | { ok: false; problem: Problem };

const AWAY: Problem = {
  code: 'unavailable',
  message: 'The studio’s server could not be reached, so nothing was saved. What you typed is still here; try again.',
};

/** Saves the desk at its door and reads the answer. Never throws: a broken line is an answer too. */
export async function saveDesk(reference: string, fields: DeskFields): Promise<Saved> {
  const answer = await ask(reference, { method: 'POST', body: JSON.stringify({ ...fields, act: 'save' }) });
  if (answer?.ok === true && isVersion(answer.value)) return { ok: true, ...answer.value };
  return { ok: false, problem: isProblem(answer?.problem) ? answer.problem : AWAY };
}

/** The draft that is saved at the server now and its version, or null when it cannot be asked. */
export async function savedDesk(reference: string): Promise<{ version: number; draft: QuoteDraft } | null> {
  const answer = await ask(reference, { method: 'GET' });
  if (answer?.ok !== true || !isVersion(answer.value)) return null;
  const { version, draft } = answer.value as { version: number; draft?: unknown };
  const parsed = quoteDraftSchema.safeParse(draft);
  return parsed.success ? { version, draft: parsed.data } : null;
}

async function ask(reference: string, init: RequestInit): Promise<Record<string, unknown> | null> {
  const headers = { 'content-type': 'application/json', accept: 'application/json' };
  const response = await fetch(`/api/commissions/${reference}/quote-draft`, { ...init, headers }).catch(() => null);
  const body: unknown = await response?.json().catch(() => null);
  return typeof body === 'object' && body !== null ? (body as Record<string, unknown>) : null;
}

function isVersion(value: unknown): value is { version: number; revision: number } {
  return typeof value === 'object' && value !== null && 'version' in value && typeof value.version === 'number';
}

function isProblem(value: unknown): value is Problem {
  return typeof value === 'object' && value !== null && 'message' in value && 'code' in value;
}
