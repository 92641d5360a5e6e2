import { noise } from './noise';
import type { Vec } from './solid';

/** Red, green, blue, each 0 to 1, linear enough for a picture. */
export type Colour = [number, number, number];

export type MaterialName =
  'bright' | 'filed' | 'cast' | 'stained' | 'wax' | 'shell' | 'wood' | 'cord' | 'cavity' | 'iron';

interface Material {
  base: Colour;
  /** Share of mirror against matt, 0 to 1, and how narrow its lights are. */
  mirror: number;
  gloss: number;
  /** How rough the surface is and how fine, in bumps a mm. */
  rough: number;
  grain: [along: number, across: number];
  /** How much its colour changes from spot to spot. */
  mottle: number;
}

const MATERIALS: Record<MaterialName, Material> = {
  bright: { base: [1.06, 0.64, 0.235], mirror: 0.9, gloss: 20, rough: 0.07, grain: [0.16, 3.2], mottle: 0.05 },
  filed: { base: [0.9, 0.55, 0.21], mirror: 0.6, gloss: 10, rough: 0.2, grain: [0.22, 3.6], mottle: 0.1 },
  cast: { base: [0.33, 0.215, 0.125], mirror: 0.26, gloss: 5, rough: 0.3, grain: [0.42, 0.42], mottle: 0.5 },
  stained: { base: [0.55, 0.38, 0.19], mirror: 0.42, gloss: 8, rough: 0.14, grain: [0.3, 2.4], mottle: 0.3 },
  wax: { base: [0.4, 0.13, 0.085], mirror: 0.1, gloss: 18, rough: 0.1, grain: [0.5, 0.8], mottle: 0.1 },
  shell: { base: [0.74, 0.7, 0.62], mirror: 0, gloss: 4, rough: 0.75, grain: [1.1, 1.1], mottle: 0.16 },
  wood: { base: [0.5, 0.33, 0.18], mirror: 0.05, gloss: 8, rough: 0.2, grain: [1.6, 0.06], mottle: 0.4 },
  cord: { base: [0.56, 0.47, 0.33], mirror: 0, gloss: 4, rough: 0.5, grain: [1.4, 1.4], mottle: 0.2 },
  cavity: { base: [0.27, 0.2, 0.125], mirror: 0, gloss: 4, rough: 0.34, grain: [1.9, 1.9], mottle: 0.16 },
  iron: { base: [0.2, 0.21, 0.22], mirror: 0.3, gloss: 8, rough: 0.3, grain: [0.6, 0.6], mottle: 0.2 },
};

/** The window, upper left; as the picture lies: right, down, towards the reader. */
export const LIGHT: Vec = [-0.5, -0.52, 0.69];
const RIM: Vec = [0.78, 0.1, 0.62];

/** What a mirror sees in a direction: a tall window, a lamp on the other side, a dim room with a dark floor. */
function room(x: number, y: number, z: number, gloss: number): number {
  const window = Math.max(0, x * LIGHT[0] + y * LIGHT[1] + z * LIGHT[2]);
  const lamp = Math.max(0, x * RIM[0] + y * RIM[1] + z * RIM[2]);
  const sky = 0.15 + 0.26 * Math.max(0, z) - 0.17 * y;
  return sky + 1.5 * window ** gloss + 0.86 * window ** 3 + 0.4 * lamp ** (gloss * 0.7);
}

/** A spot of a piece: where it is on the piece (mm), and where in the picture (-0.5 to 0.5). */
interface Spot {
  along: number;
  across: number;
  x: number;
  y: number;
}

/** Colour of a spot with this normal, as the picture lies. */
export function shade(name: MaterialName, spot: Spot, nx: number, ny: number, nz: number): Colour {
  const { base, mirror, gloss, rough, grain, mottle } = MATERIALS[name];
  const { along, across } = spot;
  const [u, v] = [along * grain[0] + 40, across * grain[1] + 40];
  const bump = noise(u, v) * 0.62 + noise(u * 2.3 + 9, v * 2.3) * 0.38;
  // The eye stands over the middle, so a flat face does not mirror the same spot of the room all over.
  let x = nx + (bump - 0.5) * rough - spot.x * 0.3 * mirror;
  let y = ny + (noise(u + 71, v + 13) - 0.5) * rough - spot.y * 0.3 * mirror;
  let z = Math.max(nz, 0.02);
  const length = Math.hypot(x, y, z);
  x /= length;
  y /= length;
  z /= length;
  const lit = Math.max(0, x * LIGHT[0] + y * LIGHT[1] + z * LIGHT[2]);
  const seen = room(2 * z * x, 2 * z * y, 2 * z * z - 1, gloss);
  const spots = 1 + (noise(along * 0.11 + 9, across * 0.16 + 5) - 0.5) * mottle + (bump - 0.5) * mottle * 0.7;
  const light = ((0.2 + 0.95 * lit) * (1 - mirror) + seen * mirror) * spots;
  const white = mirror > 0.5 ? 0.2 * Math.max(0, seen - 0.9) : (1 - mirror) * 0.08 * Math.max(0, seen - 0.7);
  return [base[0] * light + white, base[1] * light + white, base[2] * light + white * 0.85];
}
