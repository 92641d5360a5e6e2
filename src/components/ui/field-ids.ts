/** What a field's hint and error are called, and what its input says it is described by. */
export function fieldIds(id: string, hint?: unknown, error?: unknown) {
  const hintId = hint ? `${id}-hint` : undefined;
  const errorId = error ? `${id}-error` : undefined;
  const describedBy = [hintId, errorId].filter(Boolean).join(' ') || undefined;
  return { hintId, errorId, describedBy };
}
