/** More than any form of ours has; reading them would only cost time. */
const MOST_FIELDS = 2_000;
const MOST_DEEP = 8;

/**
 * Why values from outside cannot be taken, as a sentence, or null: text that PostgreSQL cannot keep (a zero character,
 * half a surrogate pair), or so many or so deeply nested values that reading them is a burden.
 */
export function flawOf(value: unknown, depth = 0): string | null {
  if (typeof value === 'string')
    return value.includes('\0') || /\p{Cs}/u.test(value)
      ? 'The text holds a character that no text may hold. Type it again instead of pasting it.'
      : null;
  if (typeof value !== 'object' || value === null) return null;
  if (depth === MOST_DEEP) return 'The values are nested deeper than anything here has use for.';
  const entries = Object.entries(value);
  if (entries.length > MOST_FIELDS) return 'These are more values than any form here has.';
  for (const [name, item] of entries) {
    const flaw = flawOf(name) ?? flawOf(item, depth + 1);
    if (flaw) return flaw;
  }
  return null;
}
