import type { Drawing, SectionSpec } from '../drawing';
import type { Profile } from './profile';

export type Point = [number, number];

const oval: SectionSpec = { shape: 'oval' };
const ramp = (from: number, to: number, x: number) => Math.min(1, Math.max(0, (x - from) / (to - from)));

/** Half-height (0 to 1 of the half-thickness) of a section at `s`, the share of the half-width from -1 to 1. */
export function halfHeight(spec: SectionSpec, s: number): number {
  const x = Math.min(1, Math.abs(s));
  const land = spec.land ?? 0.3;
  const web = spec.web ?? 0.4;
  switch (spec.shape) {
    case 'lenticular':
      return 1 - x * x;
    case 'rhombic':
      return 1 - x;
    case 'oval':
      return Math.sqrt(1 - x * x);
    case 'rectangular':
      return 1 - 0.08 * ramp(0.94, 1, x);
    case 'rounded':
      return (1 - x ** 4) ** 0.25;
    case 'hexagonal':
      return 1 - ramp(land, 1, x);
    case 'midrib':
      return x < land ? web + (1 - web) * Math.sqrt(1 - (x / land) ** 2) : web * (1 - ramp(land, 1, x));
    case 'flanged':
      return web + (1 - web) * ramp(1 - land * 1.35, 1 - land * 0.8, x) * (1 - 0.25 * ramp(0.92, 1, x));
  }
}

/** Half-height where one section passes into the next along the piece. */
export function blendedHeight(sections: Drawing['sections'], at: Profile, s: number): number {
  const a = halfHeight(sections[at.section] ?? oval, s);
  if (at.section === at.next) return a;
  return a + (halfHeight(sections[at.next] ?? oval, s) - a) * at.blend;
}

/** Shares of the half-width at which a section is sampled, from -1 to 1, closer towards the edges. */
export function crossPlaces(n: number): number[] {
  return Array.from({ length: n + 1 }, (_, i) => -Math.cos((Math.PI * i) / n));
}

/**
 * The section as a closed polygon of [across, height] in mm, always with the same number of corners for the same `n`,
 * front side first. Neighbouring sections can therefore be joined corner to corner.
 */
export function sectionPolygon(sections: Drawing['sections'], at: Profile, n = 48): Point[] {
  const across = (s: number) => (s < 0 ? s * at.right : s * at.left);
  const front = crossPlaces(n).map((s): Point => [across(s), blendedHeight(sections, at, s) * at.front]);
  const back = crossPlaces(n).map((s): Point => [across(s), -blendedHeight(sections, at, s) * at.back]);
  return [...front, ...back.reverse()];
}

/** Area of a polygon, mm2 for mm (shoelace formula; unsigned). */
export function polygonArea(points: Point[]): number {
  let twice = 0;
  points.forEach(([x, y], i) => {
    const [nx, ny] = points[(i + 1) % points.length]!;
    twice += x * ny - nx * y;
  });
  return Math.abs(twice) / 2;
}
