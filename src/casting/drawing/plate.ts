import type { Drawing } from '../drawing';
import { dotsData, pathData } from './path';
import type { Point } from './section';
import type { Light } from './stipple';
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
  const level = (at: number) => stances[drawing.stance]([at, 0])[lying ? 0 : 1];
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

/** Short ticks on both sides of the plan where a section is taken. */
function ticks(drawing: Drawing, plan: Shape[], reachMm: number): Shape[] {
  const outline = plan.filter((s) => s.role === 'outline').flatMap((s) => s.points);
  return drawing.cuts.flatMap(({ at }) => {
    const near = outline.filter((p) => Math.abs(p[0] - at) < reachMm).map((p) => p[1]);
    const [lo, hi] = [Math.min(0, ...near), Math.max(0, ...near)];
    return [
      {
        role: 'tick' as const,
        points: [
          [at, hi + reachMm * 0.4],
          [at, hi + reachMm * 1.4],
        ] as Point[],
      },
      {
        role: 'tick' as const,
        points: [
          [at, lo - reachMm * 0.4],
          [at, lo - reachMm * 1.4],
        ] as Point[],
      },
    ];
  });
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
    placed([...face, ...ticks(drawing, face, gap * 0.22)], place),
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

/**
 * The plate of a piece in the manner of a finds drawing: plan, sections beside their cuts, side view, scale bar. All in
 * mm at 1:1, so a bar of 50 is 50 units of the view box. Pure: one description always gives the same path data.
 */
export function plateOf(drawing: Drawing, options: PlateOptions): Plate {
  const longest = boxOf(planShapes(drawing, lights[drawing.stance], 0));
  const gap = Math.max(longest.x1 - longest.x0, longest.y1 - longest.y0) * 0.075;
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
