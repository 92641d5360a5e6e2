/** Asks one of this site's own addresses for JSON; null when it cannot be had. The caller checks its shape. */
export async function fetchJson(path: string): Promise<unknown> {
  const response = await fetch(path, { headers: { accept: 'application/json' } }).catch(() => null);
  if (!response?.ok) return null;
  return response.json().catch(() => null);
}
