import { z } from 'zod';

/** What was typed and not yet sent, as this browser keeps it. */
const draftSchema = z.object({
  /** The enquiry's own number, so that sending it twice sends it once. */
  clientId: z.string().optional().catch(undefined),
  /** Inputs of the estimate. */
  estimate: z.record(z.string(), z.string()).optional().catch(undefined),
  /** Words of the enquiry, by the names of their inputs. */
  words: z.record(z.string(), z.string()).optional().catch(undefined),
  /** Numbers of the files sent so far. */
  uploads: z.array(z.string()).optional().catch(undefined),
});
export type Draft = z.output<typeof draftSchema>;

const KEY = 'enquiry-draft';

/** The draft of this browser; empty when there is none or the browser keeps nothing. */
export function readDraft(): Draft {
  try {
    const parsed = draftSchema.safeParse(JSON.parse(localStorage.getItem(KEY) ?? '{}'));
    return parsed.success ? parsed.data : {};
  } catch {
    return {};
  }
}

/** Puts a part of the draft in place of the earlier one. A browser that keeps nothing loses it with the page. */
export function keepDraft(part: Draft): void {
  try {
    localStorage.setItem(KEY, JSON.stringify({ ...readDraft(), ...part }));
  } catch {
    return;
  }
}

/** Forgets the draft: it was sent, or is to be begun afresh. */
export function dropDraft(): void {
  try {
    localStorage.removeItem(KEY);
  } catch {
    return;
  }
}

/** The draft's own number; `fresh` becomes it when it has none yet. */
export function draftNumber(fresh: string): string {
  const { clientId } = readDraft();
  if (clientId) return clientId;
  keepDraft({ clientId: fresh });
  return fresh;
}
