import sharp from 'sharp';
import { GROUNDS, type GroundName } from './grounds';
import { type Colour, type MaterialName, shade } from './materials';
import { noise, speck } from './noise';
import { type Camera, draw, emptyHits, HEIGHT, type Hits, onBench, type Placed, WIDTH } from './raster';
import { type Shadow, shadowOf } from './shadow';

/** A piece on the bench and what it is made of. `sunk` pieces are hollows in the ground and throw no shadow. */
export interface Thing extends Placed {
  material: MaterialName;
  sunk?: boolean;
}

/** A photo to be made: what lies where, how it is seen, and what is drawn over it as SVG in pixels. */
export interface Scene {
  ground: GroundName | ((x: number, y: number) => Colour);
  camera: Camera;
  things: Thing[];
  /** Marks, bars and glows over the picture; asked once all is in its place. */
  over: (camera: Camera) => string[];
  /** Light of the whole: 1 is the bench by day. */
  daylight?: number;
}

const STEPS = 4096;
const BRIGHTEST = 4;

/** Light (0 to 4) to a byte: a soft shoulder for the lights, then the eye’s curve. */
const BYTES = Uint8Array.from({ length: STEPS }, (_, i) => {
  const bright = (i / STEPS) * BRIGHTEST;
  return Math.min(255, 255 * (bright / (1 + 0.3 * bright ** 1.6)) ** (1 / 1.5));
});

function toByte(light: number): number {
  const step = Math.round((light / BRIGHTEST) * STEPS);
  return BYTES[step < 0 ? 0 : step >= STEPS ? STEPS - 1 : step]!;
}

/** The picture as JPEG bytes, the way a phone would send it. */
export async function photograph(scene: Scene): Promise<Buffer> {
  const { camera, things } = scene;
  const hits = emptyHits();
  things.forEach((thing, index) => draw(hits, thing, camera, index + 1));
  const shadow = shadowOf(
    things.filter((thing) => !thing.sunk),
    camera,
  );
  const raw = { width: WIDTH, height: HEIGHT, channels: 3 as const };
  const svg = `<svg xmlns="http://www.w3.org/2000/svg" width="${WIDTH}" height="${HEIGHT}">${scene.over(camera).join('')}</svg>`;
  return sharp(paint(scene, hits, shadow), { raw })
    .composite([{ input: Buffer.from(svg) }])
    .jpeg({ quality: 90 })
    .toBuffer();
}

function paint({ ground, camera, things, daylight = 1 }: Scene, hits: Hits, shadow: Shadow): Buffer {
  const bench = typeof ground === 'function' ? ground : GROUNDS[ground];
  const out = Buffer.alloc(WIDTH * HEIGHT * 3);
  for (let y = 0; y < HEIGHT; y += 1) {
    for (let x = 0; x < WIDTH; x += 1) {
      const at = y * WIDTH + x;
      const id = hits.piece[at]!;
      const colour = id === 0 ? onGround(bench, camera, shadow, x, y) : onPiece(things[id - 1]!, hits, at, x, y);
      const fall = daylight * falloff(x, y);
      const grain = (speck(x, y) - 0.5) * 5;
      for (let k = 0; k < 3; k += 1) out[at * 3 + k] = Math.min(255, Math.max(0, toByte(colour[k]! * fall) + grain));
    }
  }
  return out;
}

/** The window lights the upper left; the corners of any lens are darker. */
function falloff(x: number, y: number): number {
  const [u, v] = [x / WIDTH - 0.5, y / HEIGHT - 0.5];
  return (1.06 - 0.34 * u - 0.36 * v) * (1 - 0.5 * (u * u + v * v));
}

function onGround(bench: (x: number, y: number) => Colour, camera: Camera, shadow: Shadow, x: number, y: number) {
  const [mx, my] = onBench(x, y, camera);
  const [red, green, blue] = bench(mx, my);
  const light = 1.1 * (1 - 0.86 * shadow.at(x, y));
  return [red * light, green * light, blue * light] as Colour;
}

function onPiece({ material, sunk }: Thing, hits: Hits, at: number, px: number, py: number): Colour {
  const [nx, ny, nz] = [hits.normal[at * 3]!, hits.normal[at * 3 + 1]!, hits.normal[at * 3 + 2]!];
  const [along, across] = [hits.along[at]!, hits.across[at]!];
  const [red, green, blue] = shade(material, { along, across, x: px / WIDTH - 0.5, y: py / WIDTH - 0.33 }, nx, ny, nz);
  if (material === 'stained') return stained([red, green, blue], along, across);
  if (!sunk) return [red, green, blue];
  const deep = 1 - Math.min(0.45, -hits.height[at]! * 0.028);
  return [red * deep, green * deep, blue * deep];
}

/** Bronze that stood in the wet: brown, with green in patches along one side. */
function stained([red, green, blue]: Colour, along: number, across: number): Colour {
  const patch =
    noise(along * 0.05 + 3, across * 0.12 + 8) + across * 0.006 + (noise(along * 0.4, across * 0.5) - 0.5) * 0.35;
  const k = Math.min(0.75, Math.max(0, (patch - 0.52) * 2.4));
  return [red * (1 - k * 0.62), green * (1 - k * 0.2), blue * (1 - k * 0.08) + k * 0.05];
}
