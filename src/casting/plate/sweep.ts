import type { Body, Drawing, End } from '../drawing';
import { profileAlong, reach, samplePlaces, type Profile } from './profile';
import { sectionPolygon, type Point } from './section';

type Spine = Body['spine'];
/** A place on the line a body follows: position and unit normal, both in the spine's plane. */
type Place = { x: number; y: number; nx: number; ny: number };
/** What is swept. A hollow follows the line of its body: `line` holds the body's own first and last place. */
export type Sweep = Pick<Body, 'spine' | 'stations' | 'section' | 'ends'> & { line?: [number, number] };
export type View = 'plan' | 'side';

/** Smooth curve through points (uniform Catmull-Rom), as many short chords. */
export function smoothThrough(points: Point[], steps = 16, closed = false): Point[] {
  if (points.length < 3) return points;
  const n = points.length;
  const pick = (i: number) => points[closed ? (i + n) % n : Math.min(n - 1, Math.max(0, i))]!;
  const out: Point[] = [];
  for (let i = 0; i < (closed ? n : n - 1); i += 1) {
    const [p0, p1, p2, p3] = [pick(i - 1), pick(i), pick(i + 1), pick(i + 2)];
    for (let k = 0; k < steps; k += 1) {
      const t = k / steps;
      const f = (j: 0 | 1) =>
        0.5 *
        (2 * p1[j] +
          (p2[j] - p0[j]) * t +
          (2 * p0[j] - 5 * p1[j] + 4 * p2[j] - p3[j]) * t * t +
          (3 * p1[j] - p0[j] - 3 * p2[j] + p3[j]) * t * t * t);
      out.push([f(0), f(1)]);
    }
  }
  if (!closed) out.push(points[n - 1]!);
  return out;
}

/** Length of a chain of points, mm. */
export function chainLength(points: Point[]): number {
  return points.slice(1).reduce((sum, p, i) => sum + Math.hypot(p[0] - points[i]![0], p[1] - points[i]![1]), 0);
}

/** The line a body follows: the axis itself, or its spine measured by length and stretched to the stations. */
function follow(spine: Spine, from: number, to: number): (at: number) => Place {
  if (!spine) return (at) => ({ x: at, y: 0, nx: 0, ny: 1 });
  const chain = smoothThrough(spine.points, 24);
  const total = chainLength(chain);
  const lengths = [0];
  chain.slice(1).forEach((p, i) => lengths.push(lengths[i]! + Math.hypot(p[0] - chain[i]![0], p[1] - chain[i]![1])));
  return (at) => {
    const wanted = ((at - from) / (to - from)) * total;
    let i = 0;
    while (i < chain.length - 2 && wanted > lengths[i + 1]!) i += 1;
    const [a, b] = [chain[i]!, chain[i + 1]!];
    const span = lengths[i + 1]! - lengths[i]!;
    const k = (wanted - lengths[i]!) / span;
    const before = chain[Math.max(0, i - 1)]!;
    const after = chain[Math.min(chain.length - 1, i + 2)]!;
    const dx = after[0] - before[0];
    const dy = after[1] - before[1];
    const length = Math.hypot(dx, dy);
    return { x: a[0] + (b[0] - a[0]) * k, y: a[1] + (b[1] - a[1]) * k, nx: -dy / length, ny: dx / length };
  };
}

/** A body cut into slices: where each slice stands and how large it is there. */
export type Slice = { at: number; place: Place; profile: Profile };

/** The body's slices at chosen places (mm along its stations). */
export function slicesAt(body: Sweep, places: number[]): Slice[] {
  const [from, to] = body.line ?? reach(body.stations);
  const place = follow(body.spine, from, to);
  const profile = profileAlong(body.stations, body.ends, body.section);
  return places.map((at) => ({ at, place: place(at), profile: profile(at) }));
}

/** The body's slices at every station and about `n` places between. */
export function slicesOf(body: Sweep, n: number): Slice[] {
  return slicesAt(body, samplePlaces(body.stations, body.ends, n));
}

/** Millimetres of line for each millimetre of stations: 1 on a straight axis, else as the spine stretches them. */
export function lineStretch(body: Sweep): number {
  const [from, to] = body.line ?? reach(body.stations);
  return body.spine ? chainLength(smoothThrough(body.spine.points, 24)) / (to - from) : 1;
}

/** The hollow of a body as a sweep of its own, following the same line. */
export function hollowSweep(body: Body): Sweep | undefined {
  return body.hollow && { ...body.hollow, spine: body.spine, line: reach(body.stations) };
}

/** Outline in the plane the line lies in: one side out, the other back, with bulged ends. */
function offsetOutline(body: Sweep, view: View, n: number): Point[] {
  const slices = slicesOf(body, n);
  const plus = (p: Profile) => (view === 'plan' ? p.left : Math.max(0, p.front));
  const minus = (p: Profile) => (view === 'plan' ? p.right : Math.max(0, p.back));
  const edge = (s: Slice, d: number): Point => [s.place.x + s.place.nx * d, s.place.y + s.place.ny * d];
  const there = slices.map((s) => edge(s, plus(s.profile)));
  const back = slices.map((s) => edge(s, -minus(s.profile))).reverse();
  const line = view === 'plan' ? endLine : endTaper;
  const end = line(there[there.length - 1]!, back[0]!, body.ends?.end);
  const start = line(back[back.length - 1]!, there[0]!, body.ends?.start);
  return [...there, ...end, ...back, ...start];
}

/** Share of the end's thickness left at the outermost place of a bulged end. */
export const BULGE_TAPER = 0.4;

/** A bulged end seen from the side: it reaches out by the bulge and thins on the way. */
function endTaper(a: Point, b: Point, end: End | undefined): Point[] {
  const width = Math.hypot(b[0] - a[0], b[1] - a[1]);
  const bulge = end?.bulge ?? 0;
  if (bulge <= 0 || width === 0) return [];
  const [nx, ny] = [-(b[1] - a[1]) / width, (b[0] - a[0]) / width];
  const at = (t: number): Point => [a[0] + (b[0] - a[0]) * t + nx * bulge, a[1] + (b[1] - a[1]) * t + ny * bulge];
  return [at(0.5 - BULGE_TAPER / 2), at(0.5 + BULGE_TAPER / 2)];
}

/** Points between the two corners of an end: a parabola bent outwards by `bulge` mm, less a V-shaped notch. */
function endLine(a: Point, b: Point, end: End | undefined): Point[] {
  const width = Math.hypot(b[0] - a[0], b[1] - a[1]);
  if (!end || width === 0) return [];
  const { bulge = 0, notch } = end;
  const [nx, ny] = [-(b[1] - a[1]) / width, (b[0] - a[0]) / width];
  return Array.from({ length: 47 }, (_, i) => (i + 1) / 48).map((t): Point => {
    const cut = notch ? notch.depth * Math.max(0, 1 - (Math.abs(t - 0.5) * 2 * width) / notch.width) : 0;
    const k = 4 * t * (1 - t) * bulge - cut;
    return [a[0] + (b[0] - a[0]) * t + nx * k, a[1] + (b[1] - a[1]) * t + ny * k];
  });
}

/** Every slice's section as points of [along, across, height]. */
function ringsOf(body: Sweep, sections: Drawing['sections'], n: number): [number, number, number][][] {
  const inPlan = body.spine?.plane !== 'side';
  return slicesOf(body, n).map(({ place, profile }) =>
    sectionPolygon(sections, profile, 16).map(([v, z]): [number, number, number] =>
      inPlan
        ? [place.x + place.nx * v, place.y + place.ny * v, z]
        : [place.x + place.nx * z, v, place.y + place.ny * z],
    ),
  );
}

/** Silhouette of the swept body seen across the plane of its line, found on a row of cuts across the axis. */
function envelope(body: Sweep, sections: Drawing['sections'], view: View): Point[] {
  const rings = ringsOf(body, sections, 60).map((ring) =>
    ring.map((p): Point => [p[0], view === 'plan' ? p[1] : p[2]]),
  );
  const all = rings.flat().map((p) => p[0]);
  const lo = Math.min(...all);
  const hi = Math.max(...all);
  const steps = 90;
  const cuts = Array.from({ length: steps + 1 }, (_, i) => ({
    x: lo + ((hi - lo) * (1 - Math.cos((Math.PI * i) / steps))) / 2,
    min: Infinity,
    max: -Infinity,
  }));
  const note = (a: Point, b: Point) => {
    const [p, q] = a[0] <= b[0] ? [a, b] : [b, a];
    for (const cut of cuts) {
      if (cut.x < p[0] - 1e-9 || cut.x > q[0] + 1e-9) continue;
      const k = q[0] - p[0] < 1e-9 ? 0 : (cut.x - p[0]) / (q[0] - p[0]);
      const y = p[1] + (q[1] - p[1]) * k;
      cut.min = Math.min(cut.min, y);
      cut.max = Math.max(cut.max, y);
    }
  };
  rings.forEach((ring, i) =>
    ring.forEach((p, j) => {
      note(p, ring[(j + 1) % ring.length]!);
      const next = rings[i + 1]?.[j];
      if (next) note(p, next);
    }),
  );
  const met = cuts.filter((cut) => cut.max >= cut.min);
  return [...met.map((c): Point => [c.x, c.max]), ...met.reverse().map((c): Point => [c.x, c.min])];
}

/** Closed outline of a body in a view, as [along, across] (plan) or [along, height] (side), mm. */
export function outlineOf(body: Sweep, sections: Drawing['sections'], view: View): Point[] {
  const flat = !body.spine || body.spine.plane === view;
  return flat ? offsetOutline(body, view, 160) : envelope(body, sections, view);
}
