import type { Drawing, End, Knop } from '../drawing';
import { profileAlong } from './profile';
import { blendedHeight, polygonArea, sectionPolygon } from './section';
import { BULGE_TAPER, hollowSweep, lineStretch, slicesOf, type Slice, type Sweep } from './sweep';

/** Section areas integrated along a body by the trapezium rule, mm3. */
function sweptVolume(body: Sweep, sections: Drawing['sections']): number {
  const slices = slicesOf(body, 400);
  const area = slices.map((s) => polygonArea(sectionPolygon(sections, s.profile, 64)));
  const sum = slices
    .slice(1)
    .reduce((total, s, i) => total + ((area[i]! + area[i + 1]!) / 2) * (s.at - slices[i]!.at), 0);
  const ends =
    endVolume(area[0]!, slices[0]!, body.ends?.start) +
    endVolume(area[area.length - 1]!, slices[slices.length - 1]!, body.ends?.end);
  return sum * lineStretch(body) + ends;
}

/** What a bulged end adds (two thirds of width by bulge, thinning outwards) and a notch takes away, mm3. */
function endVolume(areaMm2: number, slice: Slice, end: End | undefined): number {
  const width = slice.profile.left + slice.profile.right;
  if (!end || width === 0) return 0;
  const bulge = (areaMm2 * (end.bulge ?? 0) * 2 * (1 + BULGE_TAPER)) / 6;
  const notch = end.notch ? ((areaMm2 / width) * end.notch.depth * end.notch.width) / 2 : 0;
  return bulge - notch;
}

/** A boss as a pyramid on a diamond foot, mm3 (V = base x height / 3). */
function knopVolume(knop: Knop): number {
  return (2 * knop.along * knop.spread * (knop.tip - knop.foot)) / 3;
}

/**
 * Approximate solid volume of the described piece in mm3: section areas summed along each body, less its hollow and
 * the holes. Where bodies run into each other the overlap is counted twice, so the figure is a check on a mass (within
 * some per cent), not a measure of a solid.
 */
export function approximateVolumeMm3(drawing: Drawing): number {
  const { sections } = drawing;
  const bodies = drawing.bodies.reduce((sum, body) => {
    const hollow = hollowSweep(body);
    const metal = sweptVolume(body, sections) - (hollow ? sweptVolume(hollow, sections) : 0);
    return sum + metal * (body.mirrored ? 2 : 1);
  }, 0);
  const knops = drawing.knops.reduce((sum, knop) => sum + knopVolume(knop), 0);
  return bodies + knops - holesVolume(drawing);
}

function holesVolume(drawing: Drawing): number {
  const main = drawing.bodies[0]!;
  const along = profileAlong(main.stations, main.ends, main.section);
  return drawing.holes.reduce((sum, hole) => {
    const at = along(hole.at);
    const s = hole.across / (hole.across < 0 ? at.right : at.left);
    if (!(Math.abs(s) <= 1)) return sum;
    const thick = blendedHeight(drawing.sections, at, s) * (at.front + at.back);
    return sum + thick * Math.PI * (hole.d / 2) ** 2 * (hole.mirrored ? 2 : 1);
  }, 0);
}
