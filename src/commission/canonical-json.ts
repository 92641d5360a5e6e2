/**
 * JSON with the keys of every object in code-unit order and nothing undefined, so that equal values give equal text: the
 * server hashes it. Arrays keep their order. Throws on a number JSON cannot hold (NaN, infinity): that is a bug.
 */
export function canonicalJson(value: unknown): string {
  if (typeof value === 'number' && !Number.isFinite(value)) throw new TypeError(`JSON cannot hold ${value}`);
  if (Array.isArray(value))
    return `[${value.map((item) => canonicalJson(item === undefined ? null : item)).join(',')}]`;
  if (value instanceof Date) return JSON.stringify(value);
  if (value === null || typeof value !== 'object') return JSON.stringify(value) ?? 'null';
  const entries = Object.entries(value)
    .filter(([, item]) => item !== undefined)
    .sort(([a], [b]) => (a < b ? -1 : 1))
    .map(([key, item]) => `${JSON.stringify(key)}:${canonicalJson(item)}`);
  return `{${entries.join(',')}}`;
}
