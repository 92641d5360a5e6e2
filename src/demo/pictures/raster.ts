import type { Mesh } from './mesh';
import type { Vec } from './solid';

export const WIDTH = 960;
export const HEIGHT = 640;

/** How the bench is looked at: mm at the middle of the picture, pixels a mm, and how far the camera leans back. */
export interface Camera {
  middle: [number, number];
  pxPerMm: number;
  tilt: number;
}

/** What was hit at each pixel: height above the bench (mm), normal, and which piece (0 is the bench). */
export interface Hits {
  depth: Float32Array;
  height: Float32Array;
  normal: Float32Array;
  piece: Uint8Array;
  /** Place on the piece itself, mm: marks and grain stay with it. */
  along: Float32Array;
  across: Float32Array;
}

export function emptyHits(): Hits {
  const size = WIDTH * HEIGHT;
  return {
    depth: new Float32Array(size).fill(-Infinity),
    height: new Float32Array(size),
    normal: new Float32Array(size * 3),
    piece: new Uint8Array(size),
    along: new Float32Array(size),
    across: new Float32Array(size),
  };
}

/** Bench coordinates (mm right, down, up) to pixels and nearness. The far side of the bench looks a little smaller. */
export function project([x, y, z]: Vec, { middle, pxPerMm, tilt }: Camera): Vec {
  const [sin, cos] = [Math.sin(tilt), Math.cos(tilt)];
  const [dx, dy] = [x - middle[0], y - middle[1]];
  const near = dy * sin + z * cos;
  const away = (WIDTH / pxPerMm) * 3.2;
  const scale = (pxPerMm * away) / (away - near);
  return [WIDTH / 2 + dx * scale, HEIGHT / 2 + (dy * cos - z * sin) * scale, near];
}

/** The other way: the place on the bench (height 0) that a pixel shows. */
export function onBench(px: number, py: number, { middle, pxPerMm, tilt }: Camera): [number, number] {
  const [sin, cos] = [Math.sin(tilt), Math.cos(tilt)];
  const away = (WIDTH / pxPerMm) * 3.2;
  const v = (py - HEIGHT / 2) / pxPerMm;
  const dy = (v * away) / (cos * away + v * sin);
  const scale = (pxPerMm * away) / (away - dy * sin);
  return [middle[0] + (px - WIDTH / 2) / scale, middle[1] + dy];
}

/** A mesh set on the bench: turned by `turn`, moved to `at`, lifted by `lift`. */
export interface Placed {
  mesh: Mesh;
  at: [number, number];
  turn: number;
  lift: number;
}

/** A corner of a placed mesh in bench coordinates. The piece’s across axis runs up the picture when it is not turned. */
export function place([x, y, z]: Vec, { at, turn, lift }: Omit<Placed, 'mesh'>): Vec {
  const [sin, cos] = [Math.sin(turn), Math.cos(turn)];
  return [at[0] + x * cos + y * sin, at[1] + x * sin - y * cos, z + lift];
}

function direction([x, y, z]: Vec, turn: number): Vec {
  const [sin, cos] = [Math.sin(turn), Math.cos(turn)];
  return [x * cos + y * sin, x * sin - y * cos, z];
}

interface Corner {
  screen: Vec;
  normal: Vec;
  height: number;
  own: Vec;
}

/** Draws a placed mesh into the hits as piece `id`; what is nearer stays. */
export function draw(hits: Hits, placed: Placed, camera: Camera, id: number): void {
  const { corners, normals } = placed.mesh;
  const corner = (i: number): Corner => {
    const own: Vec = [corners[i]!, corners[i + 1]!, corners[i + 2]!];
    const there = place(own, placed);
    const normal = direction([normals[i]!, normals[i + 1]!, normals[i + 2]!], placed.turn);
    return { screen: project(there, camera), normal, height: there[2], own };
  };
  for (let i = 0; i < corners.length; i += 9) fill(hits, corner(i), corner(i + 3), corner(i + 6), id);
}

function fill(hits: Hits, a: Corner, b: Corner, c: Corner, id: number): void {
  const [ax, ay] = a.screen;
  const [bx, by] = b.screen;
  const [cx, cy] = c.screen;
  const area = (bx - ax) * (cy - ay) - (by - ay) * (cx - ax);
  if (Math.abs(area) < 1e-6) return;
  const x0 = Math.max(0, Math.floor(Math.min(ax, bx, cx)));
  const x1 = Math.min(WIDTH - 1, Math.ceil(Math.max(ax, bx, cx)));
  const y0 = Math.max(0, Math.floor(Math.min(ay, by, cy)));
  const y1 = Math.min(HEIGHT - 1, Math.ceil(Math.max(ay, by, cy)));
  for (let y = y0; y <= y1; y += 1) {
    for (let x = x0; x <= x1; x += 1) {
      const px = x + 0.5;
      const py = y + 0.5;
      const w0 = ((bx - px) * (cy - py) - (by - py) * (cx - px)) / area;
      const w1 = ((cx - px) * (ay - py) - (cy - py) * (ax - px)) / area;
      const w2 = 1 - w0 - w1;
      if (w0 < 0 || w1 < 0 || w2 < 0) continue;
      const near = a.screen[2] * w0 + b.screen[2] * w1 + c.screen[2] * w2;
      const at = y * WIDTH + x;
      if (near <= hits.depth[at]!) continue;
      hits.depth[at] = near;
      hits.piece[at] = id;
      hits.height[at] = a.height * w0 + b.height * w1 + c.height * w2;
      hits.along[at] = a.own[0] * w0 + b.own[0] * w1 + c.own[0] * w2;
      hits.across[at] = a.own[1] * w0 + b.own[1] * w1 + c.own[1] * w2;
      for (let k = 0; k < 3; k += 1)
        hits.normal[at * 3 + k] = a.normal[k]! * w0 + b.normal[k]! * w1 + c.normal[k]! * w2;
    }
  }
}
