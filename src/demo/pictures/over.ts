import type { Drawing } from '../../casting/drawing';
import { planShapes } from '../../casting/plate/views';
import { type Camera, place, type Placed, project } from './raster';

const fixed = (value: number) => value.toFixed(1);

type Spot = Omit<Placed, 'mesh'>;

function screen(points: readonly [number, number][], height: number, spot: Spot, camera: Camera): [number, number][] {
  return points.map(([x, y]) => {
    const [px, py] = project(place([x, y, height], spot), camera);
    return [px, py];
  });
}

const pathOf = (points: readonly [number, number][], closed = false) =>
  points.map(([x, y], i) => `${i === 0 ? 'M' : 'L'}${fixed(x)} ${fixed(y)}`).join('') + (closed ? 'Z' : '');

/** A groove: dark on the window's side, light on the other. */
export function groove(
  points: readonly [number, number][],
  height: number,
  spot: Spot,
  camera: Camera,
  mm: number,
): string {
  const d = pathOf(screen(points, height, spot, camera));
  const width = Math.max(0.8, mm * camera.pxPerMm);
  const line = (colour: string, opacity: number, shift: number) =>
    `<path d="${d}" fill="none" stroke="${colour}" stroke-opacity="${opacity}" stroke-width="${fixed(width)}" stroke-linecap="round" stroke-linejoin="round" transform="translate(${fixed(shift)} ${fixed(shift)})"/>`;
  return line('#fff2d8', 0.22, width * 0.55) + line('#120a04', 0.42, 0);
}

/** The form's own drawn lines as grooves on the piece, and its holes with the bench showing through. */
export function details(
  drawing: Drawing,
  spot: Spot,
  camera: Camera,
  height: number,
  holes: 'open' | 'riveted',
): string[] {
  const shapes = planShapes(drawing, [0, 0, 1], 0);
  const lines = shapes
    .filter((shape) => shape.role === 'edge' || shape.role === 'fine')
    .filter(() => drawing.knops.length === 0)
    .map((shape) =>
      groove(
        shape.closed ? [...shape.points, shape.points[0]!] : shape.points,
        height,
        spot,
        camera,
        shape.role === 'edge' ? 0.5 : 0.35,
      ),
    );
  const rounds = shapes
    .filter((shape) => shape.role === 'paper')
    .map((shape) => {
      const d = pathOf(screen(shape.points, height, spot, camera), true);
      return holes === 'open'
        ? `<path d="${d}" fill="#0d1113" stroke="#000" stroke-opacity=".5"/>`
        : `<path d="${d}" fill="#d8a45a" stroke="#3a2410" stroke-opacity=".8" stroke-width="2"/>`;
    });
  return [...lines, ...rounds];
}

/** The studio's mark, a reed between two dots, with the year's and code's strokes beside it; `size` mm high. */
export function mark(at: [number, number], size: number, height: number, spot: Spot, camera: Camera): string[] {
  const [x, y] = at;
  const reed: [number, number][] = [
    [x, y - size / 2],
    [x, y + size * 0.1],
    [x + size * 0.06, y + size / 2],
  ];
  const leaf: [number, number][] = [
    [x, y - size * 0.1],
    [x - size * 0.22, y + size * 0.22],
    [x - size * 0.2, y + size * 0.34],
  ];
  const dot = (dx: number): [number, number][] => [
    [x + dx - 0.05 * size, y],
    [x + dx + 0.05 * size, y],
  ];
  const strokes = [0.95, 1.15, 1.35, 1.6, 1.8, 2.0, 2.2].map((dx, i): [number, number][] => [
    [x + dx * size, y - size * 0.22],
    [x + dx * size + (i % 2) * size * 0.07, y + size * 0.22],
  ]);
  const width = size * 0.09;
  return [reed, leaf, dot(-size * 0.5), dot(size * 0.5), ...strokes].map((points) =>
    groove(points, height, spot, camera, width),
  );
}

/** A bar of 50 mm on the bench in five blocks, its left end at `at` (mm). */
export function bar(at: [number, number], camera: Camera): string {
  const block = 10;
  const tall = 4.5;
  const spot: Spot = { at: [0, 0], turn: 0, lift: 0 };
  const box = (from: number, to: number, fill: string, rim = 0) => {
    const [x, y] = [at[0], -at[1]];
    const corners: [number, number][] = [
      [x + from, y + rim],
      [x + to, y + rim],
      [x + to, y - tall - rim],
      [x + from, y - tall - rim],
    ];
    return `<path d="${pathOf(screen(corners, 0, spot, camera), true)}" fill="${fill}"/>`;
  };
  const ground = box(-0.8, 5 * block + 0.8, '#e9e4d8');
  return (
    ground + [0, 1, 2, 3, 4].map((i) => box(i * block, (i + 1) * block, i % 2 === 0 ? '#e9e4d8' : '#1a1d1f')).join('')
  );
}

/** Molten metal in a round cup: a white-hot middle, and light on what is near. `at` mm, `radius` mm. */
export function glow(at: [number, number], radius: number, camera: Camera, id: string): string {
  const [x, y] = project([at[0], at[1], 0], camera);
  const r = radius * camera.pxPerMm;
  const flat = Math.cos(camera.tilt);
  return (
    `<defs><radialGradient id="${id}a"><stop offset="0" stop-color="#ff8a2a" stop-opacity=".75"/><stop offset=".35" stop-color="#e0530c" stop-opacity=".34"/><stop offset="1" stop-color="#a02a00" stop-opacity="0"/></radialGradient>` +
    `<radialGradient id="${id}b"><stop offset="0" stop-color="#fff3c4"/><stop offset=".55" stop-color="#ffc24d"/><stop offset=".86" stop-color="#ff7a12"/><stop offset="1" stop-color="#b93a04"/></radialGradient></defs>` +
    `<ellipse cx="${fixed(x)}" cy="${fixed(y)}" rx="${fixed(r * 4.2)}" ry="${fixed(r * 4.2 * flat)}" fill="url(#${id}a)"/>` +
    `<ellipse cx="${fixed(x)}" cy="${fixed(y)}" rx="${fixed(r)}" ry="${fixed(r * flat)}" fill="url(#${id}b)" stroke="#2a0d02" stroke-opacity=".7" stroke-width="${fixed(r * 0.09)}"/>` +
    `<path transform="rotate(${(id.length > 1 ? Number(id.slice(1)) : 0) * 47} ${fixed(x)} ${fixed(y)})" d="M${fixed(x - r * 0.5)} ${fixed(y + r * 0.16)}q${fixed(r * 0.3)} ${fixed(-r * 0.22)} ${fixed(r * 0.62)} ${fixed(-r * 0.05)}" fill="none" stroke="#7a2703" stroke-opacity=".55" stroke-width="${fixed(r * 0.05)}"/>`
  );
}
