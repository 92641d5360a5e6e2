import type { Triangle } from './stl-problems';

/** Surfaces with more corners than this are not counted, to stay within about 20 MB. */
const MOST_CORNERS = 100_000;

/** Counts the separate surfaces of a file: triangles that share a corner belong together. Null for very large files. */
export function createShellCount() {
  let corners: Map<string, number> | null = new Map();
  const parent: number[] = [];

  function root(index: number): number {
    let top = index;
    while (parent[top] !== top) top = parent[top] as number;
    while (parent[index] !== top) {
      const next = parent[index] as number;
      parent[index] = top;
      index = next;
    }
    return top;
  }

  function cornerIndex(known: Map<string, number>, t: Triangle, corner: number): number {
    const key = `${t[corner * 3]} ${t[corner * 3 + 1]} ${t[corner * 3 + 2]}`;
    let index = known.get(key);
    if (index === undefined) {
      index = parent.length;
      parent.push(index);
      known.set(key, index);
    }
    return index;
  }

  return {
    add(t: Triangle): void {
      if (!corners) return;
      const first = root(cornerIndex(corners, t, 0));
      parent[root(cornerIndex(corners, t, 1))] = first;
      parent[root(cornerIndex(corners, t, 2))] = root(first);
      if (corners.size > MOST_CORNERS) {
        corners = null;
        parent.length = 0;
      }
    },
    count: (): number | null => (corners ? parent.filter((top, index) => top === index).length : null),
  };
}
