import type { Colour } from './materials';
import { GROUNDS } from './grounds';
import { noise } from './noise';

/** A wooden frame of rammed sand, seen from above: its middle and half its size in mm. */
export interface Flask {
  x: number;
  y: number;
  halfWide: number;
  halfHigh: number;
}

const RIM = 14;

function wood(x: number, y: number, along: boolean): Colour {
  const [u, v] = along ? [x, y] : [y, x];
  const grain = noise(u * 0.03 + 40, v * 0.9 + 40) - 0.5;
  const k = 0.85 + grain * 0.5 + (noise(u * 0.2, v * 2.2 + 9) - 0.5) * 0.2;
  return [0.3 * k, 0.2 * k, 0.115 * k];
}

/** A bench with frames of sand on it. The rims are lit from the window and throw a little shade inwards. */
export function withFlasks(flasks: readonly Flask[], bench = GROUNDS.board): (x: number, y: number) => Colour {
  return (x, y) => {
    for (const flask of flasks) {
      const [dx, dy] = [x - flask.x, y - flask.y];
      const [right, down] = [Math.abs(dx) - flask.halfWide, Math.abs(dy) - flask.halfHigh];
      const out = Math.max(right, down);
      if (out > RIM) continue;
      if (out > 0) {
        const colour = wood(x, y, down > right);
        const bevel = out > RIM - 1.6 || out < 1.2 ? 0.55 : 1;
        return [colour[0] * bevel, colour[1] * bevel, colour[2] * bevel];
      }
      const edge = Math.min(dx + flask.halfWide, dy + flask.halfHigh);
      const shade = edge < 9 ? 0.45 + 0.55 * (Math.max(0, edge) / 9) : 1;
      const [red, green, blue] = GROUNDS.sand(x, y);
      return [red * shade, green * shade, blue * shade];
    }
    const near = flasks.some(
      ({ x: fx, y: fy, halfWide, halfHigh }) =>
        x - fx < halfWide + RIM + 13 &&
        y - fy < halfHigh + RIM + 13 &&
        x - fx > -halfWide - RIM &&
        y - fy > -halfHigh - RIM,
    );
    const [red, green, blue] = bench(x, y);
    const k = near ? 0.5 : 1;
    return [red * k, green * k, blue * k];
  };
}
