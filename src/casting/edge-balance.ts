import type { Triangle } from './stl-problems';

/** Most unmatched edges kept at once, about 70 MB of memory. Beyond it edges are no longer counted, only balanced. */
const MOST_OPEN = 1_000_000;

const bits = new Float64Array(1);
const halves = new Uint32Array(bits.buffer);

/** Stirs a 32-bit word into another (the finishing steps of MurmurHash3, public domain). */
function stir(hash: number, word: number): number {
  let h = Math.imul(hash ^ word, 0xcc9e2d51);
  h = Math.imul((h << 15) | (h >>> 17), 0x1b873593);
  h ^= h >>> 16;
  h = Math.imul(h, 0x85ebca6b);
  return h ^ (h >>> 13);
}

/** A 32-bit name for a corner: equal corners have equal names, with -0 read as 0. */
function cornerName(t: Triangle, corner: number, seed: number): number {
  let hash = seed;
  for (let axis = 0; axis < 3; axis++) {
    bits[0] = (t[corner * 3 + axis] as number) + 0;
    hash = stir(stir(hash, halves[0] as number), halves[1] as number);
  }
  return hash;
}

const LANES = 2;

/** Keeps the edges that have no partner yet, as long as they are not too many. */
function createOpenEdges() {
  let open: Map<number, number> | null = new Map();
  return {
    count(key: number, step: number): void {
      if (!open) return;
      const next = (open.get(key) ?? 0) + step;
      if (next === 0) open.delete(key);
      else open.set(key, next);
      if (open.size > MOST_OPEN) open = null;
    },
    total(): number | null {
      if (!open) return null;
      let total = 0;
      for (const surplus of open.values()) total += Math.abs(surplus);
      return total;
    },
  };
}

/**
 * Watches the edges of a surface. A surface bounds a solid exactly when every edge is walked as often one way as the
 * other; then its volume does not depend on the origin. Two answers:
 * - `balanced`, in fixed memory at any size: two 32-bit sums over the names of directed edges, one way added and the
 *   other way subtracted; a wrong "yes" has a chance of about 2^-64.
 * - `openEdges`, the number without a partner, by keeping the unmatched ones: at most a million at a time, else null.
 */
export function createEdgeBalance() {
  const sums = new Int32Array(LANES);
  const parity = new Int32Array(LANES);
  const names = new Int32Array(3 * LANES);
  const open = createOpenEdges();
  const name = (corner: number, lane: number) => names[corner * LANES + lane] as number;
  const same = (i: number, j: number) => name(i, 0) === name(j, 0) && name(i, 1) === name(j, 1);

  /** One directed edge between corners i and j of the triangle whose names are loaded. */
  function edge(i: number, j: number): void {
    const forward = name(i, 0) < name(j, 0) || (name(i, 0) === name(j, 0) && name(i, 1) < name(j, 1));
    const [from, to] = forward ? [i, j] : [j, i];
    const step = forward ? 1 : -1;
    let key = 0;
    for (let lane = 0; lane < LANES; lane++) {
      const word = stir(stir(lane + 1, name(from, lane)), name(to, lane));
      sums[lane] = (sums[lane] as number) + step * word;
      parity[lane] = (parity[lane] as number) ^ word;
      key = lane === 0 ? (word >>> 0) * 0x200000 : key + ((word >>> 0) & 0x1fffff);
    }
    open.count(key, step);
  }

  return {
    /** Adds a triangle. One with two equal corners adds nothing: its two remaining edges undo each other. */
    add(t: Triangle): void {
      for (let corner = 0; corner < 3; corner++)
        for (let lane = 0; lane < LANES; lane++)
          names[corner * LANES + lane] = cornerName(t, corner, lane * 0x9e3779b1 + 1);
      if (same(0, 1) || same(1, 2) || same(2, 0)) return;
      edge(0, 1);
      edge(1, 2);
      edge(2, 0);
    },
    balanced: () => sums.every((sum) => sum === 0),
    /** Every edge is used an even number of times, whichever way: closed, if only the triangles were turned alike. */
    paired: () => parity.every((sum) => sum === 0),
    openEdges: open.total,
  };
}
