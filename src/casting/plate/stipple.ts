import type { Drawing } from '../drawing';
import { blendedHeight, type Point } from './section';
import type { Profile } from './profile';
import { lineStretch, slicesOf, type Slice, type Sweep } from './sweep';

/** Light on an excavation plate falls from the upper left. Unit vector in [along, across, towards the reader]. */
export type Light = [number, number, number];

/** Even, repeatable scatter in the unit square (the R2 sequence, from the plastic number): no randomness. */
function scatter(i: number): [number, number] {
  const g = 1.324717957244746;
  return [(0.5 + i / g + mixed(i, 1) * 0.012) % 1, (0.5 + i / (g * g) + mixed(i, 2) * 0.03) % 1];
}

/** A number in [0, 1) that looks unrelated from one `i` to the next: integer mixing, the same on every machine. */
function mixed(i: number, salt: number): number {
  let h = Math.imul(i + 1, 0x9e3779b1) ^ Math.imul(salt, 0x85ebca6b);
  h = Math.imul(h ^ (h >>> 15), 0x2c1b3c6d);
  h = Math.imul(h ^ (h >>> 12), 0x297a2d39);
  return ((h ^ (h >>> 15)) >>> 0) / 4294967296;
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
  return Math.min(1, Math.max(0, (0.765 - lit) * 1.35));
}

/** Widest place of the body, mm. */
const widest = (slices: Slice[]) => Math.max(...slices.map((s) => s.profile.left + s.profile.right));

/** Plan area a body's dots are spread over, mm2: its length by twice its widest half. */
export function stippledArea(body: Sweep): number {
  const slices = slicesOf(body, 40);
  return (slices[slices.length - 1]!.at - slices[0]!.at) * widest(slices);
}

/**
 * Dots that model the rounding of a body in plan, denser away from the light: the stippling of a finds drawing.
 * `tries` spots are looked at; the same description always gives the same dots. Positions are [along, across] in mm.
 */
export function stipple(body: Sweep, sections: Drawing['sections'], light: Light, tries: number): Point[] {
  const slices = slicesOf(body, 120);
  const width = widest(slices);
  const [from, to] = [slices[0]!.at, slices[slices.length - 1]!.at];
  const stretch = lineStretch(body);
  const dots: Point[] = [];
  for (let k = 0; k < tries; k += 1) {
    const [a, b] = scatter(k);
    const at = from + a * (to - from);
    const i = Math.max(
      0,
      slices.findIndex((slice) => slice.at >= at),
    );
    const { place, profile } = slices[i]!;
    const across = (b - 0.5) * width;
    const half = across < 0 ? profile.right : profile.left;
    const s = half > 0 ? across / half : 2;
    if (Math.abs(s) > 0.97 || mixed(k, 3) > darkness(slices, i, s, sections, light)) continue;
    const ahead = (at - slices[i]!.at) * stretch;
    dots.push([place.x + place.ny * ahead + place.nx * across, place.y - place.nx * ahead + place.ny * across]);
  }
  return dots;
}
