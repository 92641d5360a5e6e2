import { createEdgeBalance } from './edge-balance';
import { createShellCount } from './shells';
import type { Triangle } from './stl-problems';
import { createTriangleSums } from './triangle-sums';

/**
 * What a surface measures. An STL has no unit: the numbers are millimetres if the file was saved in millimetres.
 * `volumeMm3` is null unless the surface is closed. `problems` are sentences for the sender.
 */
export interface Measure {
  volumeMm3: number | null;
  areaMm2: number;
  boxMm: [number, number, number];
  closed: boolean;
  /** Separate surfaces; null when the file is too large to count them. */
  shells: number | null;
  triangles: number;
  /** Triangles left out because a corner is not a number, and triangles without area. */
  notFinite: number;
  degenerate: number;
  /** Edges without a partner; null when there were too many at once to count. */
  openEdges: number | null;
  problems: string[];
}

/** A longest side outside this is probably a unit mistake. Studio's starting values: 5 mm to 2 m. */
const PLAUSIBLE_MM = [5, 2000] as const;

function unitProblem(longest: number): string | null {
  const asked = 'Tell us one real dimension, and we will scale it.';
  const size = Number(longest.toPrecision(3));
  if (longest > 0 && longest < PLAUSIBLE_MM[0])
    return `Read as millimetres the longest side is only ${size} mm. The file may be in metres, centimetres or inches. ${asked}`;
  if (longest > PLAUSIBLE_MM[1])
    return `Read as millimetres the longest side is ${size} mm. The file may be in another unit. ${asked}`;
  return null;
}

function openProblem(openEdges: number | null, paired: boolean): string {
  if (paired)
    return 'Some triangles face the wrong way, so inside and outside are mixed up. Make the normals consistent and save it again.';
  const edges =
    openEdges === null ? 'More edges than we can count' : openEdges === 1 ? 'One edge' : `${openEdges} edges`;
  return `The surface is not closed: ${edges} have no neighbour. It has an area but no volume. Close the holes, or give us the mass.`;
}

function isFiniteTriangle(t: Triangle): boolean {
  for (let i = 0; i < 9; i++) if (!Number.isFinite(t[i])) return false;
  return true;
}

/**
 * Measures triangles one by one: volume, area, box, closedness. Memory stays bounded at any size: closedness itself needs
 * none, counting open edges up to about 70 MB, counting shells up to about 20 MB; beyond that those two answers are null.
 */
export function createMeasurer() {
  const sums = createTriangleSums();
  const edges = createEdgeBalance();
  const shells = createShellCount();
  let triangles = 0;
  let notFinite = 0;
  let degenerate = 0;

  function problems(closed: boolean, volume: number): string[] {
    const longest = Math.max(...sums.box());
    return [
      triangles === 0 ? 'The file holds no triangles.' : null,
      notFinite > 0
        ? `${notFinite} of ${triangles} triangles have corners that are not numbers. Repair the file and save it again.`
        : null,
      triangles > notFinite && !closed ? openProblem(edges.openEdges(), edges.paired()) : null,
      closed && volume < 0 ? 'The surface is inside out; we have read it the right way round.' : null,
      closed && volume === 0 ? 'The surface encloses nothing.' : null,
      unitProblem(longest),
    ].filter((sentence) => sentence !== null);
  }

  return {
    add(triangle: Triangle): void {
      triangles += 1;
      if (!isFiniteTriangle(triangle)) {
        notFinite += 1;
        return;
      }
      if (!sums.add(triangle)) degenerate += 1;
      edges.add(triangle);
      shells.add(triangle);
    },
    finish(): Measure {
      const closed = triangles > notFinite && notFinite === 0 && edges.balanced();
      const volume = sums.volume();
      return {
        volumeMm3: closed && volume !== 0 ? Math.abs(volume) : null,
        areaMm2: sums.area(),
        boxMm: sums.box(),
        closed,
        shells: shells.count(),
        triangles,
        notFinite,
        degenerate,
        openEdges: edges.openEdges(),
        problems: problems(closed, volume),
      };
    },
  };
}
