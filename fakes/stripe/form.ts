/** What a form-encoded body holds: text, lists and named fields, nested as far as the brackets say. */
export type FormValue = string | FormValue[] | { [name: string]: FormValue };
export type FormTree = { [name: string]: FormValue };

type Branch = Map<string, Branch | string>;

/**
 * Reads Stripe's form encoding: `metadata[ref]=x`, `line_items[0][quantity]=1`, `expand[]=y`. Numbers that count from
 * 0 and empty brackets make lists; every leaf stays text.
 */
export function readForm(body: string): FormTree {
  const root: Branch = new Map();
  for (const [name, value] of new URLSearchParams(body)) place(root, steps(name), value);
  return Object.fromEntries([...root].map(([key, branch]) => [key, settle(branch)]));
}

/** Splits `a[b][0]` into `a`, `b`, `0`. */
function steps(name: string): string[] {
  const open = name.indexOf('[');
  if (open <= 0) return [name];
  return [name.slice(0, open), ...[...name.slice(open).matchAll(/\[([^\]]*)\]/g)].map((found) => found[1] ?? '')];
}

function place(branch: Branch, [step = '', ...rest]: string[], value: string): void {
  const key = step === '' ? String(branch.size) : step;
  if (rest.length === 0) {
    branch.set(key, value);
    return;
  }
  const below = branch.get(key);
  const next: Branch = below instanceof Map ? below : new Map();
  branch.set(key, next);
  place(next, rest, value);
}

function settle(branch: Branch | string): FormValue {
  if (typeof branch === 'string') return branch;
  const keys = [...branch.keys()];
  if (keys.length > 0 && keys.every((key, index) => key === String(index))) return [...branch.values()].map(settle);
  return Object.fromEntries([...branch].map(([key, below]) => [key, settle(below)]));
}
