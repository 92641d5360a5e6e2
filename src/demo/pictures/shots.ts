import { framed, type Framing } from './framing';
import type { GroundName } from './grounds';
import type { MaterialName } from './materials';
import type { Mesh } from './mesh';
import { bar, details, mark } from './over';
import { type Camera, project, WIDTH, HEIGHT, place, onBench } from './raster';
import type { Scene, Thing } from './scene';
import { lying, type Stock } from './stock';

/** How one form lies in a picture. */
export interface Shown {
  stock: Stock;
  material: MaterialName;
  /** Another mesh than the form's own, such as a casting with its gates on. */
  mesh?: Mesh;
  at?: [number, number];
  degrees?: number;
  holes?: 'open' | 'riveted';
  /** Place of the studio's mark on the piece, mm along and across, and how high it stands. */
  mark?: { at: [number, number]; size: number };
  /** Leaves out the form's drawn lines, which a shell or a rough casting does not show. */
  plain?: boolean;
}

interface Rest {
  ground: GroundName;
  framing?: Framing;
  /** Looks closely at a place on the first piece: mm along and across, and how many mm the picture is wide. */
  close?: { at: [number, number]; wide: number };
  bar?: boolean;
  also?: Thing[];
  over?: (camera: Camera, things: Thing[]) => string[];
  daylight?: number;
}

/** A picture of one or more forms on the bench. */
export function onTheBench(shown: readonly Shown[], rest: Rest): Scene {
  const things = shown.map(({ stock, mesh, material, at, degrees }) =>
    lying(mesh ?? stock.mesh, material, at, degrees),
  );
  const all = [...things, ...(rest.also ?? [])];
  const camera = rest.close ? closeUp(things[0]!, shown[0]!.stock, rest.close) : framed(all, rest.framing);
  const over = (seen: Camera) => [
    ...shown.flatMap((each, index) => drawn(each, things[index]!, seen)),
    ...(rest.over?.(seen, things) ?? []),
    ...(rest.bar ? [bar(barPlace(all, seen, rest.close !== undefined), seen)] : []),
  ];
  return { ground: rest.ground, camera, things: all, over, ...(rest.daylight ? { daylight: rest.daylight } : {}) };
}

function drawn({ stock, holes = 'open', mark: stamped, plain }: Shown, thing: Thing, camera: Camera): string[] {
  const height = stock.high[2];
  return [
    ...(plain ? [] : details(stock.drawing, thing, camera, height * 0.55, holes)),
    ...(stamped ? mark(stamped.at, stamped.size, height * 0.7, thing, camera) : []),
  ];
}

function closeUp(thing: Thing, stock: Stock, { at, wide }: { at: [number, number]; wide: number }): Camera {
  const pxPerMm = WIDTH / wide;
  const target = place([at[0], at[1], stock.high[2] * 0.5], thing);
  let camera: Camera = { middle: [0, 0], pxPerMm, tilt: 0.42 };
  for (let pass = 0; pass < 4; pass += 1) {
    const [x, y] = project(target, camera);
    const [right, down] = [(x - WIDTH / 2) / pxPerMm, (y - HEIGHT / 2) / pxPerMm / Math.cos(camera.tilt)];
    camera = { ...camera, middle: [camera.middle[0] + right, camera.middle[1] + down] };
  }
  return camera;
}

/** Left end of the bar: under the pieces, or in the lower corner of a close view. */
function barPlace(things: readonly Thing[], camera: Camera, close: boolean): [number, number] {
  const corner = onBench(WIDTH * 0.07, HEIGHT * 0.93, camera);
  if (close) return corner;
  const [left] = onBench(WIDTH / 2, HEIGHT * 0.5, camera);
  return [left - 25, onBench(WIDTH / 2, HEIGHT * 0.93, camera)[1]];
}
