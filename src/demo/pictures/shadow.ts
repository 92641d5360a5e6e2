import { LIGHT } from './materials';
import type { Mesh } from './mesh';
import { HEIGHT, place, type Placed, project, WIDTH, type Camera } from './raster';
import type { Vec } from './solid';

const STEP = 4;
const W = Math.ceil(WIDTH / STEP);
const H = Math.ceil(HEIGHT / STEP);

/** Darkness of the bench (0 to 1) at a quarter of the picture's size: what the pieces keep the window from. */
export interface Shadow {
  at: (px: number, py: number) => number;
}

/** The shadow that falls on the bench: the pieces thrown along the light, sharper near what casts it. */
export function shadowOf(pieces: readonly Placed[], camera: Camera): Shadow {
  const near = new Float32Array(W * H);
  const far = new Float32Array(W * H);
  for (const piece of pieces) {
    cast(near, piece, camera, 1);
    cast(far, piece, camera, 0.35);
  }
  const thrown = softened(near, 2);
  const under = softened(far, 7);
  const at = (px: number, py: number) => {
    const [x, y] = [Math.min(W - 1.001, px / STEP), Math.min(H - 1.001, py / STEP)];
    return 1 - (1 - 0.62 * sample(thrown, x, y)) * (1 - 0.5 * sample(under, x, y));
  };
  return { at };
}

function sample(map: Float32Array, x: number, y: number): number {
  const [x0, y0] = [Math.floor(x), Math.floor(y)];
  const [fx, fy] = [x - x0, y - y0];
  const i = y0 * W + x0;
  const row = y0 + 1 < H ? W : 0;
  const column = x0 + 1 < W ? 1 : 0;
  const top = map[i]! * (1 - fx) + map[i + column]! * fx;
  const bottom = map[i + row]! * (1 - fx) + map[i + row + column]! * fx;
  return top * (1 - fy) + bottom * fy;
}

/** Fills every triangle as the light throws it onto the bench; `reach` shortens the throw. */
function cast(map: Float32Array, placed: Placed, camera: Camera, reach: number): void {
  const { corners } = placed.mesh satisfies Mesh;
  const thrown = (i: number): Vec => {
    const [x, y, z] = place([corners[i]!, corners[i + 1]!, corners[i + 2]!], placed);
    const down = (Math.max(0, z) / LIGHT[2]) * reach;
    const [px, py] = project([x - LIGHT[0] * down, y - LIGHT[1] * down, 0], camera);
    return [px / STEP, py / STEP, 0];
  };
  for (let i = 0; i < corners.length; i += 9) fillFlat(map, thrown(i), thrown(i + 3), thrown(i + 6));
}

function fillFlat(map: Float32Array, a: Vec, b: Vec, c: Vec): void {
  const area = (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]);
  if (Math.abs(area) < 1e-9) return;
  const x1 = Math.min(W - 1, Math.ceil(Math.max(a[0], b[0], c[0])));
  const y1 = Math.min(H - 1, Math.ceil(Math.max(a[1], b[1], c[1])));
  for (let y = Math.max(0, Math.floor(Math.min(a[1], b[1], c[1]))); y <= y1; y += 1) {
    for (let x = Math.max(0, Math.floor(Math.min(a[0], b[0], c[0]))); x <= x1; x += 1) {
      const w0 = ((b[0] - x) * (c[1] - y) - (b[1] - y) * (c[0] - x)) / area;
      const w1 = ((c[0] - x) * (a[1] - y) - (c[1] - y) * (a[0] - x)) / area;
      if (w0 >= -0.02 && w1 >= -0.02 && w0 + w1 <= 1.02) map[y * W + x] = 1;
    }
  }
}

/** Box blur, three times each way. */
function softened(map: Float32Array, radius: number): Float32Array {
  let from = map;
  for (let pass = 0; pass < 3; pass += 1) {
    from = blurred(from, radius, 1, W, W, H);
    from = blurred(from, radius, W, 1, H, W);
  }
  return from;
}

function blurred(map: Float32Array, radius: number, step: number, line: number, count: number, lines: number) {
  const out = new Float32Array(map.length);
  for (let l = 0; l < lines; l += 1) {
    let sum = 0;
    const at = (i: number) => map[l * line + Math.min(count - 1, Math.max(0, i)) * step]!;
    for (let i = -radius; i <= radius; i += 1) sum += at(i);
    for (let i = 0; i < count; i += 1) {
      out[l * line + i * step] = sum / (2 * radius + 1);
      sum += at(i + radius + 1) - at(i - radius);
    }
  }
  return out;
}
