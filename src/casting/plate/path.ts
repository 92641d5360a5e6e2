import type { Point } from './section';

/** A point set thinned so that no left-out point lies further than `tolerance` mm off (Douglas and Peucker 1973). */
export function thinned(points: Point[], tolerance: number): Point[] {
  if (points.length < 3) return points;
  const [a, b] = [points[0]!, points[points.length - 1]!];
  let worst = 0;
  let at = 0;
  points.forEach((p, i) => {
    const d = distanceToChord(p, a, b);
    if (d > worst) [worst, at] = [d, i];
  });
  if (worst <= tolerance) return [a, b];
  return [...thinned(points.slice(0, at + 1), tolerance).slice(0, -1), ...thinned(points.slice(at), tolerance)];
}

function distanceToChord(p: Point, a: Point, b: Point): number {
  const [dx, dy] = [b[0] - a[0], b[1] - a[1]];
  const length2 = dx * dx + dy * dy;
  const t = length2 === 0 ? 0 : Math.min(1, Math.max(0, ((p[0] - a[0]) * dx + (p[1] - a[1]) * dy) / length2));
  return Math.hypot(p[0] - a[0] - dx * t, p[1] - a[1] - dy * t);
}

const number = (value: number) => String(Math.round(value * 100) / 100);

/** SVG path data for a chain of points in mm, closed with Z when asked. Thinned to `tolerance` mm. */
export function pathData(points: Point[], closed: boolean, tolerance = 0.04): string {
  const kept = thinned(points, tolerance);
  const body = kept.map(([x, y], i) => `${i === 0 ? 'M' : 'L'}${number(x)} ${number(y)}`).join('');
  return closed ? `${body}Z` : body;
}

/** Dots as zero-length strokes: with round line ends each becomes a point of the pen. */
export function dotsData(points: Point[]): string {
  return points.map(([x, y]) => `M${number(x)} ${number(y)}h0`).join('');
}

/** Convex hull (monotone chain), anticlockwise. */
export function hull(points: Point[]): Point[] {
  const sorted = [...points].sort((a, b) => a[0] - b[0] || a[1] - b[1]);
  const turn = (o: Point, a: Point, b: Point) => (a[0] - o[0]) * (b[1] - o[1]) - (a[1] - o[1]) * (b[0] - o[0]);
  const half = (list: Point[]) => {
    const chain: Point[] = [];
    for (const p of list) {
      while (chain.length > 1 && turn(chain[chain.length - 2]!, chain[chain.length - 1]!, p) <= 0) chain.pop();
      chain.push(p);
    }
    return chain.slice(0, -1);
  };
  return [...half(sorted), ...half(sorted.reverse())];
}
