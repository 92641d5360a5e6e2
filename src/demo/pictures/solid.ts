import type { Drawing, Knop } from '../../casting/drawing';
import { sectionPolygon, type Point } from '../../casting/plate/section';
import { hollowSweep, slicesOf, type Slice, type Sweep } from '../../casting/plate/sweep';

/** A corner in mm: along the piece, across it, towards the reader. */
export type Vec = [number, number, number];
export type Triangle = [Vec, Vec, Vec];

/** Rings of corners, each joined to the next; all have the same number of corners. */
type Rings = Vec[][];

const CORNERS = 22;

function ringOf(sections: Drawing['sections'], { place, profile }: Slice, inPlan: boolean): Vec[] {
  return sectionPolygon(sections, profile, CORNERS).map(([across, height]: Point): Vec =>
    inPlan
      ? [place.x + place.nx * across, place.y + place.ny * across, height]
      : [place.x + place.nx * height, across, place.y + place.ny * height],
  );
}

/** The ring pushed out by a bulged end: furthest in its middle, thinning on the way. */
function bulged(ring: Vec[], before: Vec[], bulge: number): Vec[] {
  const middle = (points: Vec[]): Vec => {
    const sum = points.reduce<Vec>((total, p) => [total[0] + p[0], total[1] + p[1], total[2] + p[2]], [0, 0, 0]);
    return [sum[0] / points.length, sum[1] / points.length, sum[2] / points.length];
  };
  const [centre, inner] = [middle(ring), middle(before)];
  const out: Vec = [centre[0] - inner[0], centre[1] - inner[1], centre[2] - inner[2]];
  const length = Math.hypot(...out) || 1;
  const half = Math.max(...ring.map((p) => Math.hypot(p[0] - centre[0], p[1] - centre[1])));
  return ring.map((p) => {
    const away = Math.hypot(p[0] - centre[0], p[1] - centre[1]) / (half || 1);
    const push = (bulge * (1 - away * away)) / length;
    return [p[0] + out[0] * push, p[1] + out[1] * push, centre[2] + (p[2] - centre[2]) * 0.45];
  });
}

function ringsOf(body: Sweep, sections: Drawing['sections'], slices: number): Rings {
  const inPlan = body.spine?.plane !== 'side';
  const rings = slicesOf(body, slices).map((slice) => ringOf(sections, slice, inPlan));
  const { start, end } = body.ends ?? {};
  if ((end?.bulge ?? 0) > 0) rings.push(bulged(rings.at(-1)!, rings.at(-2)!, end!.bulge!));
  if ((start?.bulge ?? 0) > 0) rings.unshift(bulged(rings[0]!, rings[1]!, start!.bulge!));
  return rings;
}

const same = (a: Vec, b: Vec) =>
  Math.fround(a[0]) === Math.fround(b[0]) &&
  Math.fround(a[1]) === Math.fround(b[1]) &&
  Math.fround(a[2]) === Math.fround(b[2]);

function quad(a: Vec, b: Vec, c: Vec, d: Vec): Triangle[] {
  const triangles: Triangle[] = [
    [a, b, c],
    [a, c, d],
  ];
  return triangles.filter(([p, q, r]) => !same(p, q) && !same(q, r) && !same(r, p));
}

/** The skin between two rings; `out` false turns it inside out. */
function skin(a: Vec[], b: Vec[], out: boolean): Triangle[] {
  return a.flatMap((p, i) => {
    const next = (i + 1) % a.length;
    return out ? quad(p, b[i]!, b[next]!, a[next]!) : quad(p, a[next]!, b[next]!, b[i]!);
  });
}

/** A ring closed flat: its front corners joined to the ones behind them. */
function lid(ring: Vec[], out: boolean): Triangle[] {
  const half = ring.length / 2;
  return Array.from({ length: half - 1 }, (_, i) => i).flatMap((i) => {
    const [a, b, c, d] = [ring[i]!, ring[i + 1]!, ring[ring.length - 2 - i]!, ring[ring.length - 1 - i]!];
    return out ? quad(a, d, c, b) : quad(a, b, c, d);
  });
}

function walls(rings: Rings, out: boolean): Triangle[] {
  return rings.slice(1).flatMap((ring, i) => skin(rings[i]!, ring, out));
}

/** A pointed boss: four faces from its foot to its tip. */
function bossOf({ at, angle, foot, tip, along, spread }: Knop): Triangle[] {
  const turn = (angle * Math.PI) / 180;
  const [sin, cos] = [Math.sin(turn), Math.cos(turn)];
  const peak: Vec = [at, tip * sin, tip * cos];
  const feet: Vec[] = [
    [at - along, foot * sin, foot * cos],
    [at, foot * sin + spread * cos, foot * cos - spread * sin],
    [at + along, foot * sin, foot * cos],
    [at, foot * sin - spread * cos, foot * cos + spread * sin],
  ];
  return feet.map((p, i): Triangle => [p, feet[(i + 1) % feet.length]!, peak]);
}

/** The outer skin of every body and boss, for a picture: no hollows, mirrored parts on both sides. */
export function skinsOf(drawing: Pick<Drawing, 'bodies' | 'sections' | 'knops'>, slices = 84): Triangle[] {
  const bodies = drawing.bodies.flatMap((body) => {
    const rings = ringsOf(body, drawing.sections, slices);
    const mirrored = rings.map((ring) => ring.map(([x, y, z]): Vec => [x, -y, z]));
    const one = [...walls(rings, true), ...lid(rings[0]!, false), ...lid(rings.at(-1)!, true)];
    if (!body.mirrored) return one;
    return [...one, ...walls(mirrored, false), ...lid(mirrored[0]!, true), ...lid(mirrored.at(-1)!, false)];
  });
  return [...bodies, ...drawing.knops.flatMap(bossOf)];
}

/** The first body as one closed solid, its socket left open at the start: what a 3D file of the piece holds. */
export function solidOf(drawing: Drawing, slices = 100): Triangle[] {
  const [body] = drawing.bodies;
  if (!body) return [];
  const outer = ringsOf(body, drawing.sections, slices);
  const far = lid(outer.at(-1)!, true);
  const hollow = hollowSweep(body);
  if (!hollow) return [...walls(outer, true), ...lid(outer[0]!, false), ...far];
  const inner = ringsOf(hollow, drawing.sections, slices);
  const rim = skin(outer[0]!, inner[0]!, false);
  return [...walls(outer, true), ...far, ...rim, ...walls(inner, false), ...lid(inner.at(-1)!, false)];
}
