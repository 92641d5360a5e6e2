import type { Body, Drawing } from '../drawing';
import { blendedHeight, type Point } from './section';
import type { Profile } from './profile';
import { slicesOf, type Slice, type Sweep } from './sweep';

/** Light on an excavation plate falls from the upper left. Unit vector in [along, across, towards the reader]. */
export type Light = [number, number, number];

/** Even, repeatable scatter in the unit square (the R2 sequence, from the plastic number): no randomness. */
function scatter(i: number): [number, number, number] {
  const g = 1.32471795724474602596;
  return [(0.5 + i / g) % 1, (0.5 + i / (g * g)) % 1, (i * 0.61803398875) % 1];
}

const height = (sections: Drawing['sections'], p: Profile, s: number) => blendedHeight(sections, p, s) * p.front;

/** How dark a spot of the surface is, 0 (in the light) to 1. */
function darkness(slices: Slice[], i: number, s: number, sections: Drawing['sections'], light: Light): number {
  const here = slices[i]!;
  const next = slices[Math.min(slices.length - 1, i + 1)]!;
  const before = slices[Math.max(0, i - 1)]!;
  const step = 0.02;
  const [lo, hi] = [Math.max(-1, s - step), Math.min(1, s + step)];
  const half = s < 0 ? here.profile.right : here.profile.left;
  const rise = height(sections, here.profile, hi) - height(sections, here.profile, lo);
  const slopeAcross = half > 0.01 ? rise / ((hi - lo) * half) : 0;
  const span = next.at - before.at;
  const slopeAlong = span > 0 ? (height(sections, next.profile, s) - height(sections, before.profile, s)) / span : 0;
  const { nx, ny } = here.place;
  const [tx, ty] = [ny, -nx];
  const normal = [-(slopeAlong * tx + slopeAcross * nx), -(slopeAlong * ty + slopeAcross * ny), 1];
  const length = Math.hypot(normal[0]!, normal[1]!, 1);
  const lit = (normal[0]! * light[0] + normal[1]! * light[1] + light[2]) / length;
  return Math.min(1, Math.max(0, (0.74 - lit) * 1.1));
}

/** Widest place of the body, mm. */
const widest = (slices: Slice[]) => Math.max(...slices.map((s) => s.profile.left + s.profile.right));

/**
 * Dots that model the rounding of a body in plan, denser away from the light: the stippling of a finds drawing.
 * `tries` spots are looked at; the same description always gives the same dots. Positions are [along, across] in mm.
 */
export function stipple(body: Body & Sweep, sections: Drawing['sections'], light: Light, tries: number): Point[] {
  const slices = slicesOf(body, 120);
  const width = widest(slices);
  const [from, to] = [slices[0]!.at, slices[slices.length - 1]!.at];
  const dots: Point[] = [];
  let i = 0;
  for (let k = 0; k < tries; k += 1) {
    const [a, b, chance] = scatter(k);
    const at = from + a * (to - from);
    i = slices.findIndex((slice) => slice.at >= at);
    const { place, profile } = slices[Math.max(0, i)]!;
    const across = (b - 0.5) * width;
    const half = across < 0 ? profile.right : profile.left;
    const s = half > 0 ? across / half : 2;
    if (Math.abs(s) > 0.97 || chance > darkness(slices, Math.max(0, i), s, sections, light)) continue;
    dots.push([place.x + place.nx * across, place.y + place.ny * across]);
  }
  return dots;
}
