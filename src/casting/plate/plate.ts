import type { Drawing } from '../drawing';
import { dotsData, pathData } from './path';
import type { Point } from './section';
import type { Light } from './stipple';
import { slicesAt } from './sweep';
import { cutShapes, planShapes, sideShapes, type Shape, type Stroke } from './views';

/** A mark on the sheet, in drawing order. The stylesheet gives each role its weight. */
export type PlateMark = { role: Stroke; d: string };

export type Plate = {
  /** Size of the sheet in mm at 1:1, which is also the SVG's view box. */
  widthMm: number;
  heightMm: number;
  marks: PlateMark[];
  bar: { x: number; y: number; lengthMm: number; heightMm: number };
  sectionScale: 1 | 2;
};

/** `plan` shows the face alone (for a list); `full` adds sections, side view and cut ticks. */
export type PlateOptions = { views: 'plan' | 'full'; dots?: number };

type Place = (p: Point) => Point;
type Box = { x0: number; y0: number; x1: number; y1: number };

/** View coordinates (along, across) onto the sheet (right, down) for the three stances. */
const stances: Record<Drawing['stance'], Place> = {
  lying: ([along, across]) => [along, -across],
  standing: ([along, across]) => [across, along],
  upturned: ([along, across]) => [across, -along],
};

/** Light from the sheet's upper left, told in [along, across, height] of each stance (unit vector). */
const lights: Record<Drawing['stance'], Light> = {
  lying: [-0.45, 0.5, 0.74],
  standing: [-0.45, -0.5, 0.74],
  upturned: [0.45, -0.5, 0.74],
};

function boxOf(shapes: Shape[]): Box {
  const all = shapes.flatMap((s) => s.points);
  const xs = all.map((p) => p[0]);
  const ys = all.map((p) => p[1]);
  return { x0: Math.min(...xs), y0: Math.min(...ys), x1: Math.max(...xs), y1: Math.max(...ys) };
}

const placed = (shapes: Shape[], place: Place): Shape[] =>
  shapes.map((s) => ({ ...s, points: s.points.map(place), hollow: s.hollow?.map(place) }));

const moved = (shapes: Shape[], dx: number, dy: number): Shape[] => placed(shapes, ([x, y]) => [x + dx, y + dy]);

/** Sections on the sheet, each level with its cut, pushed apart where they would touch. */
function sectionRow(drawing: Drawing, gap: number): Shape[] {
  const lying = drawing.stance === 'lying';
  const k = drawing.sectionScale;
  const turn: Place = lying ? ([v, z]) => [z * k, -v * k] : ([v, z]) => [v * k, -z * k];
  const level = (at: number) => {
    const { place } = slicesAt(drawing.bodies[0]!, [at])[0]!;
    return stances[drawing.stance]([place.x, place.y])[lying ? 0 : 1];
  };
  let free = -Infinity;
  return [...drawing.cuts]
    .sort((a, b) => level(a.at) - level(b.at))
    .flatMap((cut) => {
      const shapes = placed(cutShapes(drawing, cut.at), turn);
      const box = boxOf(shapes);
      const [lo, hi] = lying ? [box.x0, box.x1] : [box.y0, box.y1];
      const shift = Math.max(level(cut.at), free + gap - lo);
      free = shift + hi;
      return lying ? moved(shapes, shift, 0) : moved(shapes, 0, shift);
    });
}

/** Short ticks across the piece, on both sides of the plan, where a section is taken. */
function ticks(drawing: Drawing, lengthMm: number): Shape[] {
  const main = drawing.bodies[0]!;
  return slicesAt(
    main,
    drawing.cuts.map((cut) => cut.at),
  ).flatMap(({ place, profile }) =>
    [profile.left, -profile.right].map((edge): Shape => {
      const out = Math.sign(edge) || 1;
      const spot = (d: number): Point => [place.x + place.nx * d, place.y + place.ny * d];
      return { role: 'tick', points: [spot(edge + out * lengthMm * 0.4), spot(edge + out * lengthMm * 1.4)] };
    }),
  );
}

function markOf(shape: Shape): PlateMark {
  if (shape.dots) return { role: shape.role, d: dotsData(shape.points) };
  const outer = pathData(shape.points, shape.closed === true);
  return { role: shape.role, d: shape.hollow ? outer + pathData(shape.hollow, true) : outer };
}

/** Views put beside one another: plan, sections, side view, each clear of the last by `gap`. */
function arranged(drawing: Drawing, options: PlateOptions, gap: number): Shape[] {
  const place = stances[drawing.stance];
  const lying = drawing.stance === 'lying';
  const face = planShapes(drawing, lights[drawing.stance], options.dots ?? 2600);
  if (options.views === 'plan') return placed(face, place);
  const rows = [
    placed([...face, ...ticks(drawing, gap * 0.22)], place),
    sectionRow(drawing, gap * 0.35),
    placed(sideShapes(drawing), place),
  ];
  let free = 0;
  return rows.flatMap((row, i) => {
    const box = boxOf(row);
    const shift = i === 0 ? 0 : free + gap - (lying ? box.y0 : box.x0);
    free = shift + (lying ? box.y1 : box.x1);
    return lying ? moved(row, 0, shift) : moved(row, shift, 0);
  });
}

/** Space between views, mm: by the length of the piece, less for a long thin one. */
function gapBetween(plan: Box): number {
  const [wide, high] = [plan.x1 - plan.x0, plan.y1 - plan.y0];
  const long = Math.max(wide, high);
  return Math.min(long * 0.075, Math.max(Math.min(wide, high) * 0.35, long * 0.032));
}

/**
 * The plate of a piece in the manner of a finds drawing: plan, sections beside their cuts, side view, scale bar. All in
 * mm at 1:1, so a bar of 50 is 50 units of the view box. Pure: one description always gives the same path data.
 */
export function plateOf(drawing: Drawing, options: PlateOptions): Plate {
  const longest = boxOf(planShapes(drawing, lights[drawing.stance], 0));
  const gap = gapBetween(longest);
  const shapes = arranged(drawing, options, gap);
  const box = boxOf(shapes);
  const margin = gap * 0.4;
  const [dx, dy] = [margin - box.x0, margin - box.y0];
  const height = box.y1 - box.y0;
  const barHeight = gap * 0.12;
  return {
    widthMm: round(Math.max(box.x1 - box.x0, drawing.scaleBarMm * 1.5) + 2 * margin),
    heightMm: round(height + margin * 2 + gap * 0.7 + barHeight),
    marks: moved(shapes, dx, dy)
      .map(markOf)
      .filter((mark) => mark.d !== ''),
    bar: {
      x: round(margin),
      y: round(margin + height + gap * 0.7),
      lengthMm: drawing.scaleBarMm,
      heightMm: round(barHeight),
    },
    sectionScale: drawing.sectionScale,
  };
}

const round = (value: number) => Math.round(value * 100) / 100;
