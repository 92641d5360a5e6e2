import type { Body, Drawing, DrawnLine, Knop } from '../drawing';
import { hull } from './path';
import { profileAlong, samplePlaces } from './profile';
import { sectionPolygon, type Point } from './section';
import { stipple, stippledArea, type Light } from './stipple';
import { hollowSweep, outlineOf, slicesAt, smoothThrough, type View } from './sweep';

/** Kinds of mark on a plate. `outline` and `fill` come in pairs; `paper` shows the ground through a hole. */
export type Stroke = 'outline' | 'fill' | 'stipple' | 'edge' | 'fine' | 'hidden' | 'paper' | 'section' | 'tick';

/** One mark in the coordinates of its view, mm. `dots` are single points of the pen. */
export type Shape = { role: Stroke; points: Point[]; closed?: boolean; dots?: boolean; hollow?: Point[] };

const mirror = (points: Point[]): Point[] => points.map(([x, y]) => [x, -y]);
const circle = (x: number, y: number, r: number): Point[] =>
  Array.from({ length: 48 }, (_, i) => [
    x + r * Math.cos((Math.PI * 2 * i) / 48),
    y + r * Math.sin((Math.PI * 2 * i) / 48),
  ]);

/** Closed outlines of a body in a view, once or on both sides of the axis. */
function outlines(body: Body, drawing: Drawing, view: View): Point[][] {
  const outline = outlineOf(body, drawing.sections, view);
  return body.mirrored && view === 'plan' ? [outline, mirror(outline)] : [outline];
}

function hollows(body: Body, drawing: Drawing, view: View): Shape[] {
  const sweep = hollowSweep(body);
  if (!sweep) return [];
  const outline = outlineOf(sweep, drawing.sections, view);
  const both = body.mirrored && view === 'plan' ? [outline, mirror(outline)] : [outline];
  return both.map((points) => ({ role: 'hidden', points, closed: true }));
}

function pair(chains: Point[][]): Shape[] {
  return [
    ...chains.map((points): Shape => ({ role: 'outline', points, closed: true })),
    ...chains.map((points): Shape => ({ role: 'fill', points, closed: true })),
  ];
}

/** A drawn line of the description in view coordinates. */
function lineShapes(line: DrawnLine, drawing: Drawing): Shape[] {
  const closed = 'points' in line && line.closed === true;
  const points = 'points' in line ? drawnPoints(line.points, line.smooth, closed) : followed(line, drawing);
  const shape: Shape = { role: line.weight, points, closed };
  return line.mirrored ? [shape, { ...shape, points: mirror(points) }] : [shape];
}

function drawnPoints(points: Point[], smooth: boolean | undefined, closed: boolean): Point[] {
  return smooth ? smoothThrough(points, 12, closed) : points;
}

/** A line at a share of the first body's half-width (plan) or half-thickness (side), the share easing between points. */
function followed(line: Extract<DrawnLine, { follow: unknown }>, drawing: Drawing): Point[] {
  const main = drawing.bodies[0]!;
  const share = profileAlong(
    line.follow.map(([at, k]) => ({ at, left: k, right: k, thickness: 1 })),
    undefined,
    undefined,
  );
  const from = line.follow[0]![0];
  const to = line.follow[line.follow.length - 1]![0];
  const between = samplePlaces(main.stations, main.ends, 160).filter((at) => at > from && at < to);
  return slicesAt(main, [from, ...between, to]).map(({ at, place, profile }): Point => {
    const k = share(at).left;
    const half = line.view === 'plan' ? [profile.left, profile.right] : [profile.front, profile.back];
    const d = k * (k < 0 ? half[1]! : half[0]!);
    return [place.x + place.nx * d, place.y + place.ny * d];
  });
}

/** A boss seen in a view: its silhouette and, when it faces the reader, the ridges from its tip. */
export function knopShapes(knop: Knop, view: View): { front: boolean; shapes: Shape[] } {
  const turn = ((knop.angle + (view === 'side' ? 90 : 0)) * Math.PI) / 180;
  const [sin, cos] = [Math.sin(turn), Math.cos(turn)];
  const tip: Point = [knop.at, knop.tip * sin];
  const foot: Point[] = [
    [knop.at - knop.along, knop.foot * sin],
    [knop.at, knop.foot * sin + knop.spread * cos],
    [knop.at + knop.along, knop.foot * sin],
    [knop.at, knop.foot * sin - knop.spread * cos],
  ];
  const front = cos > -0.05;
  const ridges = front ? foot.map((p): Shape => ({ role: 'fine', points: [tip, p] })) : [];
  return { front, shapes: [...pair([hull([...foot, tip])]), ...ridges] };
}

function knopsOf(drawing: Drawing, view: View, front: boolean): Shape[] {
  return drawing.knops
    .map((knop) => ({ knop, seen: knopShapes(knop, view) }))
    .filter(({ seen }) => seen.front === front)
    .sort((a, b) => Math.cos((a.knop.angle * Math.PI) / 180) - Math.cos((b.knop.angle * Math.PI) / 180))
    .flatMap(({ seen }) => seen.shapes);
}

/** Plan: the face of the piece, stippled, with its lines, holes and dashed hollows. Coordinates [along, across]. */
export function planShapes(drawing: Drawing, light: Light, dots: number): Shape[] {
  const joined = drawing.bodies.filter((b) => !b.over);
  const whole = drawing.bodies.reduce((sum, body) => sum + stippledArea(body) * (body.mirrored ? 2 : 1), 0);
  const dotted = (body: Body): Shape => {
    const tries = Math.round((dots * stippledArea(body)) / whole);
    const points = stipple(body, drawing.sections, light, tries);
    const turned: Light = [light[0], -light[1], light[2]];
    const other = body.mirrored ? mirror(stipple(body, drawing.sections, turned, tries)) : [];
    return { role: 'stipple', points: [...points, ...other], dots: true };
  };
  return [
    ...knopsOf(drawing, 'plan', false),
    ...pair(joined.flatMap((body) => outlines(body, drawing, 'plan'))),
    ...(dots > 0 ? joined.map(dotted) : []),
    ...drawing.bodies
      .filter((b) => b.over)
      .flatMap((body) => [...pair(outlines(body, drawing, 'plan')), ...(dots > 0 ? [dotted(body)] : [])]),
    ...drawing.bodies.flatMap((body) => hollows(body, drawing, 'plan')),
    ...knopsOf(drawing, 'plan', true),
    ...drawing.lines.filter((l) => l.view === 'plan').flatMap((l) => lineShapes(l, drawing)),
    ...drawing.holes.flatMap((h): Shape[] =>
      [h.across, ...(h.mirrored ? [-h.across] : [])].map((y) => ({
        role: 'paper',
        points: circle(h.at, y, h.d / 2),
        closed: true,
      })),
    ),
  ];
}

/** Side view: silhouettes from the edge, parts on that side over the main body, hollows dashed. [along, height]. */
export function sideShapes(drawing: Drawing): Shape[] {
  return [
    ...knopsOf(drawing, 'side', false),
    ...drawing.bodies.flatMap((body) => pair(outlines(body, drawing, 'side'))),
    ...drawing.bodies.flatMap((body) => hollows(body, drawing, 'side')),
    ...knopsOf(drawing, 'side', true),
    ...drawing.lines.filter((l) => l.view === 'side').flatMap((l) => lineShapes(l, drawing)),
  ];
}

/** The filled section of the first body at `at`, hollow left open, bosses cut through. Coordinates [across, height]. */
export function cutShapes(drawing: Drawing, at: number): Shape[] {
  const main = drawing.bodies[0]!;
  const outer = sectionPolygon(drawing.sections, profileAlong(main.stations, main.ends, main.section)(at));
  const knops = drawing.knops
    .filter((k) => Math.abs(k.at - at) < k.along)
    .map((k): Shape => {
      const size = 1 - Math.abs(k.at - at) / k.along;
      const turn = (k.angle * Math.PI) / 180;
      const spot = (radius: number, side: number): Point => [
        radius * Math.sin(turn) + side * Math.cos(turn),
        radius * Math.cos(turn) - side * Math.sin(turn),
      ];
      const foot = k.foot * 0.8;
      const tip = k.foot + (k.tip - k.foot) * size;
      return {
        role: 'section',
        points: [spot(foot, -k.spread * size), spot(tip, 0), spot(foot, k.spread * size)],
        closed: true,
      };
    });
  return [...knops, { role: 'section', points: outer, closed: true, hollow: hollowAt(drawing, at) }];
}

function hollowAt(drawing: Drawing, at: number): Point[] | undefined {
  const hollow = drawing.bodies[0]!.hollow;
  if (!hollow) return undefined;
  const [first, last] = [hollow.stations[0]!.at, hollow.stations[hollow.stations.length - 1]!.at];
  if (at < first || at > last) return undefined;
  return sectionPolygon(drawing.sections, profileAlong(hollow.stations, hollow.ends, hollow.section)(at));
}
