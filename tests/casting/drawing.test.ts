import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { drawingSchema, type Drawing } from '../../src/casting/drawing';
import { pathData, thinned } from '../../src/casting/plate/path';
import { plateOf } from '../../src/casting/plate/plate';
import { profileAlong } from '../../src/casting/plate/profile';
import { polygonArea, sectionPolygon, type Point } from '../../src/casting/plate/section';
import { approximateVolumeMm3 } from '../../src/casting/plate/volume';
import { formSchema } from '../../src/commission/pricing/form';

const folder = new URL('../../src/content/forms/', import.meta.url);
const forms = readdirSync(folder).map((name) =>
  formSchema.parse(JSON.parse(readFileSync(new URL(name, folder), 'utf8'))),
);

/** Density of the studio's alloys in g/cm3: the alloy table of the studio's pricing, TB90 8.75, TB88 8.70, RB85 8.75. */
const density: Record<string, number> = { TB90: 8.75, TB88: 8.7, RB85: 8.75 };

function round(overrides: Partial<Drawing['bodies'][number]> & Pick<Drawing['bodies'][number], 'stations'>): Drawing {
  return drawingSchema.parse({
    stance: 'lying',
    scaleBarMm: 50,
    bodies: [{ name: 'solid', ...overrides }],
    cuts: [{ at: overrides.stations[0]!.at, label: 'Cut' }],
  });
}

/** Relative error, for figures from formulae of solid geometry. */
const off = (value: number, exact: number) => Math.abs(value / exact - 1);

describe('volume of a described piece, against the formulae of solid geometry', () => {
  it('a cylinder is pi r2 h', () => {
    const d = round({
      stations: [
        { at: 0, width: 20, thickness: 20 },
        { at: 100, width: 20, thickness: 20 },
      ],
    });
    expect(off(approximateVolumeMm3(d), Math.PI * 100 * 100)).toBeLessThan(0.002);
  });

  it('a tube is the outer cylinder less the bore', () => {
    const d = round({
      stations: [
        { at: 0, width: 20, thickness: 20 },
        { at: 100, width: 20, thickness: 20 },
      ],
      hollow: {
        stations: [
          { at: 0, width: 12, thickness: 12 },
          { at: 60, width: 12, thickness: 12 },
        ],
      },
    });
    expect(off(approximateVolumeMm3(d), Math.PI * (100 * 100 - 36 * 60))).toBeLessThan(0.002);
  });

  it('a frustum of radii 3 and 2 and height 4 is 79.587 (pi h (R2 + R r + r2) / 3)', () => {
    const d = round({
      stations: [
        { at: 0, width: 6, thickness: 6 },
        { at: 4, width: 4, thickness: 4 },
      ],
    });
    expect(off(approximateVolumeMm3(d), 79.587)).toBeLessThan(0.002);
  });

  it('an ellipsoid of half-axes 2, 3 and 5, made of two domes, is 125.664 (4/3 pi a b c)', () => {
    const d = round({
      stations: [
        { at: 0, width: 6, thickness: 4 },
        { at: 10, width: 6, thickness: 4 },
      ],
      ends: { start: { cap: 5 }, end: { cap: 5 } },
    });
    expect(off(approximateVolumeMm3(d), 125.664)).toBeLessThan(0.004);
  });

  it('a ring swept along half a circle is half a torus (Pappus: area times the way of its centre)', () => {
    const way: Point[] = Array.from({ length: 25 }, (_, i) => [
      50 * Math.cos((Math.PI * i) / 24),
      50 * Math.sin((Math.PI * i) / 24),
    ]);
    const d = round({
      stations: [
        { at: 0, width: 10, thickness: 10 },
        { at: 1, width: 10, thickness: 10 },
      ],
      spine: { plane: 'plan', points: way },
    });
    expect(off(approximateVolumeMm3(d), Math.PI * 25 * Math.PI * 50)).toBeLessThan(0.003);
  });

  it('sections have the areas of their shapes: lens 2/3, rhomb 1/2, ellipse pi/4 of the box', () => {
    const at = profileAlong(
      [
        { at: 0, width: 30, thickness: 8, section: 's' },
        { at: 1, width: 30, thickness: 8 },
      ],
      undefined,
      's',
    )(0);
    const area = (shape: 'lenticular' | 'rhombic' | 'oval') => polygonArea(sectionPolygon({ s: { shape } }, at, 96));
    expect(off(area('lenticular'), (2 / 3) * 240)).toBeLessThan(0.001);
    expect(off(area('rhombic'), 120)).toBeLessThan(0.001);
    expect(off(area('oval'), (Math.PI / 4) * 240)).toBeLessThan(0.001);
  });

  it('a hole takes its cylinder away', () => {
    const plain = round({
      stations: [
        { at: 0, width: 40, thickness: 6 },
        { at: 60, width: 40, thickness: 6 },
      ],
      section: 'flat',
    });
    plain.sections = { flat: { shape: 'rectangular' } };
    const holed = { ...plain, holes: [{ at: 30, across: 0, d: 10 }] };
    expect(approximateVolumeMm3(plain) - approximateVolumeMm3(holed)).toBeCloseTo(Math.PI * 25 * 6, 6);
  });
});

describe('outlines', () => {
  it('never swell past the stations: the cubic between two equal widths is level', () => {
    const along = profileAlong(
      [
        { at: 0, width: 10, thickness: 4 },
        { at: 10, width: 30, thickness: 4 },
        { at: 20, width: 30, thickness: 4 },
        { at: 60, width: 2, thickness: 4 },
      ],
      undefined,
      undefined,
    );
    for (let at = 0; at <= 60; at += 0.25) expect(along(at).left).toBeLessThanOrEqual(15 + 1e-9);
    expect(along(15).left).toBeCloseTo(15, 9);
  });

  it('are thinned without leaving the tolerance, and end where they began', () => {
    const arc: Point[] = Array.from({ length: 400 }, (_, i) => [Math.cos(i / 100) * 40, Math.sin(i / 100) * 40]);
    const kept = thinned(arc, 0.05);
    expect(kept.length).toBeLessThan(80);
    expect(kept[0]).toEqual(arc[0]);
    expect(kept[kept.length - 1]).toEqual(arc[399]);
    // A chord over an angle a of a circle of radius r leaves r (1 - cos(a / 2)) between them.
    kept.slice(1).forEach(([x, y], i) => {
      const chord = Math.hypot(x - kept[i]![0], y - kept[i]![1]);
      expect(40 - Math.sqrt(40 ** 2 - (chord / 2) ** 2)).toBeLessThan(0.05 + 1e-3);
    });
  });

  it('are written as absolute moves and lines, closed with Z', () => {
    expect(
      pathData(
        [
          [0, 0],
          [10, 0],
          [10, 5],
        ],
        true,
      ),
    ).toBe('M0 0L10 0L10 5Z');
  });
});

/** Numbers of a path's absolute coordinates. */
const coordinates = (d: string): Point[] =>
  [...d.matchAll(/[ML](-?[\d.]+) (-?[\d.]+)/g)].map((m): Point => [Number(m[1]), Number(m[2])]);

describe.each(forms.map((form) => [form.slug, form] as const))('the plate of %s', (_, form) => {
  const plate = plateOf(form.drawing, { views: 'full' });

  it('holds only numbers, and closes every outline, fill and section', () => {
    for (const { role, d } of plate.marks) {
      expect(d).toMatch(/^M[-\d. MLZh]+$/);
      if (['outline', 'fill', 'section', 'paper'].includes(role)) expect(d.endsWith('Z')).toBe(true);
    }
  });

  it('keeps every mark on the sheet', () => {
    for (const [x, y] of plate.marks.flatMap(({ d }) => coordinates(d))) {
      expect(x).toBeGreaterThanOrEqual(0);
      expect(y).toBeGreaterThanOrEqual(0);
      expect(x).toBeLessThanOrEqual(plate.widthMm);
      expect(y).toBeLessThanOrEqual(plate.heightMm);
    }
  });

  it('shows the piece at the size the form states, so that its scale bar is true', () => {
    const face = plateOf(form.drawing, { views: 'plan', dots: 0 }).marks.filter((mark) => mark.role === 'outline');
    const points = face.flatMap(({ d }) => coordinates(d));
    const extent = (axis: 0 | 1) => Math.max(...points.map((p) => p[axis])) - Math.min(...points.map((p) => p[axis]));
    const lying = form.drawing.stance === 'lying';
    const length = lying ? extent(0) : extent(1);
    const width = lying ? extent(1) : extent(0);
    expect(Math.abs(length - form.dimensionsMm.length)).toBeLessThan(1 + form.dimensionsMm.length * 0.02);
    expect(width).toBeGreaterThan(form.dimensionsMm.width * 0.97);
    expect(width).toBeLessThan(form.dimensionsMm.width * 1.1);
    expect(plate.bar.lengthMm).toBe(form.drawing.scaleBarMm);
    expect(plate.bar.lengthMm).toBeLessThan(plate.widthMm);
  });

  it('is the same every time', () => {
    expect(plateOf(structuredClone(form.drawing), { views: 'full' })).toEqual(plate);
  });

  it('agrees with the as-cast mass within 15 % (cast mass and density of the studio’s table of forms)', () => {
    const cast = (approximateVolumeMm3(form.drawing) / 1000) * density[form.alloy]!;
    expect(off(cast, form.massesG.cast)).toBeLessThan(0.15);
  });
});

describe('a description that cannot be drawn', () => {
  it('is refused with a sentence when stations run backwards or lack a width', () => {
    const base = { stance: 'lying', scaleBarMm: 50, cuts: [{ at: 0, label: 'Cut' }] };
    const backwards = drawingSchema.safeParse({
      ...base,
      bodies: [
        {
          name: 'a',
          stations: [
            { at: 10, width: 4, thickness: 2 },
            { at: 0, width: 4, thickness: 2 },
          ],
        },
      ],
    });
    expect(backwards.error?.issues[0]?.message).toBe('Stations must follow one another along the axis.');
    const bare = drawingSchema.safeParse({
      ...base,
      bodies: [
        {
          name: 'a',
          stations: [
            { at: 0, thickness: 2 },
            { at: 9, width: 4, thickness: 2 },
          ],
        },
      ],
    });
    expect(bare.error?.issues[0]?.message).toBe('A station needs its width, or its left and right half-widths.');
  });
});
