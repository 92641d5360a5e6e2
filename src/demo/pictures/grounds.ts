import type { Colour } from './materials';
import { noise, scattered } from './noise';

export type GroundName = 'slate' | 'cloth' | 'board' | 'sand';

/** The bench at a place in mm. */
type Ground = (x: number, y: number) => Colour;

const grey = (red: number, green: number, blue: number, k: number): Colour => [red * k, green * k, blue * k];

/** Split slate: fine cleavage and a few paler scratches. */
const slate: Ground = (x, y) => {
  const broad = noise(x * 0.02 + 3, y * 0.035) - 0.5;
  const fine = noise(x * 0.9, y * 1.4) - 0.5;
  const scratch = Math.max(0, noise(x * 0.018 + y * 0.011, y * 0.9) - 0.86) * 0.5;
  return grey(0.066, 0.084, 0.09, 1 + broad * 0.35 + fine * 0.16 + scratch);
};

/** Dark wool: two sets of threads. */
const cloth: Ground = (x, y) => {
  const [u, v] = [x * 1.1 + noise(y * 0.05, 2) * 2, y * 1.1 + noise(x * 0.05, 7) * 2];
  const weave = Math.sin(u * Math.PI) * Math.sin(v * Math.PI);
  const folds = noise(x * 0.009 + 5, y * 0.007) - 0.5;
  return grey(0.04, 0.052, 0.06, 1 + weave * 0.16 + folds * 0.9 + (noise(x * 2.2, y * 2.2) - 0.5) * 0.3);
};

/** A planed bench of pale wood gone grey, its boards along the picture. */
const board: Ground = (x, y) => {
  const plank = Math.floor(y / 92 + 0.37);
  const within = y / 92 + 0.37 - plank;
  const gap = within < 0.008 || within > 0.992 ? 0.45 : 1;
  const warp = noise(x * 0.012 + plank * 31, y * 0.03) * 5;
  const grain = noise(x * 0.035 + plank * 17, y * 0.55 + warp) - 0.5;
  const pores = noise(x * 0.22, y * 3.1 + plank * 9) - 0.5;
  const tone = 0.94 + scattered(plank, 4) * 0.14;
  return grey(0.31, 0.26, 0.2, gap * tone * (1 + grain * 0.38 + pores * 0.12));
};

/** Foundry sand, rammed and struck off. */
const sand: Ground = (x, y) => {
  const fine = noise(x * 2.4, y * 2.4) - 0.5;
  const clumps = noise(x * 0.35 + 12, y * 0.35) - 0.5;
  const strokes = noise(x * 0.02, y * 0.5) - 0.5;
  return grey(0.25, 0.185, 0.115, 1 + fine * 0.34 + clumps * 0.16 + strokes * 0.14);
};

export const GROUNDS: Record<GroundName, Ground> = { slate, cloth, board, sand };
