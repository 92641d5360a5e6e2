import bunny from 'bunny';
import { describe, expect, test } from 'vitest';
import { createMeasurer } from '../../src/casting/measure';
import type { Triangle } from '../../src/casting/stl-problems';
import { box, moved, torus, turned, turnedInsideOut } from './solids';

function measure(triangles: readonly Triangle[]) {
  const measurer = createMeasurer();
  for (const triangle of triangles) measurer.add(triangle);
  return measurer.finish();
}

const AROUND = 400;
/** A regular polygon of AROUND corners has this share of its circle's area; a turned solid loses just that. */
const POLYGON = (AROUND / (2 * Math.PI)) * Math.sin((2 * Math.PI) / AROUND);

const sphereProfile = (radius: number, across: number) =>
  Array.from({ length: across + 1 }, (_, k) => {
    const angle = (Math.PI * k) / across;
    return [k === 0 || k === across ? 0 : radius * Math.sin(angle), -radius * Math.cos(angle)] as const;
  });

describe('volume and area of solids with an exact formula', () => {
  // Values: exact formulas; sphere r 3, cone r 3 h 4, frustum 3 and 2 h 4, ellipsoid 2 3 5, torus R 5 r 1, sphere r 2.5.
  test('a cone and a frustum of many sides fall short of the round ones exactly as their polygons do', () => {
    const cone = measure(turned([[0, 0], [3, 0], [0, 4]], AROUND)); // prettier-ignore
    expect(cone.volumeMm3).toBeCloseTo(37.699112 * POLYGON, 5);
    const frustum = measure(turned([[0, 0], [3, 0], [2, 4], [0, 4]], AROUND)); // prettier-ignore
    expect(frustum.volumeMm3).toBeCloseTo(79.587014 * POLYGON, 5);
    expect(frustum.areaMm2).toBeCloseTo(105.606296, 1);
    expect(frustum.closed && cone.closed).toBe(true);
  });

  test.each([
    [3, 113.097336, 113.097336],
    [2.5, 65.449847, 78.539816],
  ])('a sphere of radius %d in fine triangles is within a tenth of a per cent', (radius, volume, area) => {
    const result = measure(turned(sphereProfile(radius, 100), 200));
    expect(result.volumeMm3! / volume).toBeCloseTo(1, 3);
    expect(result.areaMm2 / area).toBeCloseTo(1, 3);
    expect(result.shells).toBe(1);
  });

  test('an ellipsoid of half-axes 2, 3 and 5 holds 125.664', () => {
    const unit = turned(sphereProfile(1, 100), 200);
    const stretched = unit.map((t) => t.map((value, i) => value * [2, 3, 5][i % 3]!) as unknown as Triangle);
    expect(measure(stretched).volumeMm3! / 125.663706).toBeCloseTo(1, 3);
  });

  test('a torus of ring 5 and tube 1 holds 98.696 under 197.392', () => {
    const result = measure(torus(5, 1, 240, 160));
    expect(result.volumeMm3! / 98.696044).toBeCloseTo(1, 3);
    expect(result.areaMm2 / 197.392088).toBeCloseTo(1, 3);
  });

  test('a box far from the origin loses no digits', () => {
    const result = measure(box([10, 20, 30], [100_000, -200_000, 300_000]));
    expect(result.volumeMm3).toBeCloseTo(6000, 6);
    expect(result.areaMm2).toBeCloseTo(2200, 6);
    expect(result.boxMm).toEqual([10, 20, 30]);
  });
});

describe('the Stanford bunny', () => {
  // npm bunny 1.0.1 (public domain). Volume and area: own sum, admesh 0.98.4 and manifold-3d 3.5.4 agree to 1e-5.
  const triangles = bunny.cells.map((cell) => cell.flatMap((index) => bunny.positions[index]!) as unknown as Triangle);

  test('measures what three other programs measured', () => {
    const result = measure(triangles);
    expect(result).toMatchObject({
      closed: true,
      shells: 1,
      openEdges: 0,
      triangles: 3674,
      notFinite: 0,
      problems: [],
    });
    expect(result.volumeMm3! / 194.288372).toBeCloseTo(1, 5);
    expect(result.areaMm2 / 218.689271).toBeCloseTo(1, 5);
    expect(result.boxMm[0]).toBeCloseTo(4.94885 + 4.95847, 4);
  });

  test('without one triangle it has an area and three open edges, but no volume', () => {
    const result = measure(triangles.slice(1));
    expect(result).toMatchObject({ closed: false, volumeMm3: null, openEdges: 3 });
    expect(result.problems.join(' ')).toContain('3 edges have no neighbour');
    expect(result.areaMm2).toBeGreaterThan(218);
  });

  test('does not care about the order of triangles or which corner comes first', () => {
    const turnedAround = [...triangles]
      .reverse()
      .map(([a, b, c, d, e, f, g, h, i]): Triangle => [d, e, f, g, h, i, a, b, c]);
    const [one, other] = [measure(triangles), measure(turnedAround)];
    expect(other.volumeMm3).toBeCloseTo(one.volumeMm3!, 9);
    expect(other.closed).toBe(true);
  });
});

describe('surfaces with something wrong', () => {
  const cube = box([10, 10, 10]);

  test('a surface inside out keeps its volume and is mentioned', () => {
    const result = measure(turnedInsideOut(cube));
    expect(result.volumeMm3).toBeCloseTo(1000, 9);
    expect(result.problems).toEqual([expect.stringContaining('inside out')]);
  });

  test('one triangle turned round leaves no volume and says why', () => {
    const [first, ...rest] = cube;
    const result = measure([...turnedInsideOut([first!]), ...rest]);
    expect(result).toMatchObject({ closed: false, volumeMm3: null });
    expect(result.problems[0]).toContain('face the wrong way');
  });

  test('a corner that is not a number takes the volume away and is counted', () => {
    const [first, ...rest] = cube;
    const broken = [NaN, ...first!.slice(1)] as unknown as Triangle;
    const result = measure([broken, ...rest]);
    expect(result).toMatchObject({ notFinite: 1, closed: false, volumeMm3: null });
    expect(result.problems[0]).toContain('1 of 12 triangles');
  });

  test('triangles without area are counted and do no harm', () => {
    const point: Triangle = [0, 0, 0, 0, 0, 0, 10, 0, 0];
    expect(measure([...cube, point])).toMatchObject({ degenerate: 1, closed: true, openEdges: 0 });
  });

  test('two solids that do not touch are two shells with the sum of their volumes', () => {
    const result = measure([...cube, ...moved(cube, [50, 0, 0])]);
    expect(result.shells).toBe(2);
    expect(result.volumeMm3).toBeCloseTo(2000, 9);
  });

  test('-0 and 0 are the same place', () => {
    const negative = cube.map((t) => t.map((value) => (value === 0 ? -0 : value)) as unknown as Triangle);
    expect(measure([...cube.slice(0, 6), ...negative.slice(6)]).closed).toBe(true);
  });

  test('sizes that no casting has ask for one real dimension', () => {
    const inches = 3.937008; // the 100 mm block that admesh 0.98.4 ships, saved in inches: 61.023746 cubic inches
    const result = measure(box([inches, inches, inches]));
    expect(result.volumeMm3).toBeCloseTo(61.023746, 4);
    expect(result.volumeMm3! * 25.4 ** 3).toBeCloseTo(1_000_000, -2);
    expect(result.problems[0]).toContain('one real dimension');
  });

  test('nothing at all is said to be nothing', () => {
    expect(measure([])).toMatchObject({
      volumeMm3: null,
      closed: false,
      triangles: 0,
      problems: ['The file holds no triangles.'],
    });
  });
});
