import type { Triangle } from '../../src/casting/stl-problems';

/** Solids for tests as triangles, outward by the right-hand rule, and STL files written from them. */

type Point = readonly [number, number, number];

function triangle(a: Point, b: Point, c: Point): Triangle {
  return [...a, ...b, ...c] as unknown as Triangle;
}

/** A box from the origin corner `at`, with sides along the axes. */
export function box([x, y, z]: Point, at: Point = [0, 0, 0]): Triangle[] {
  const p = (i: number, j: number, k: number): Point => [at[0] + i * x, at[1] + j * y, at[2] + k * z];
  const face = (a: Point, b: Point, c: Point, d: Point) => [triangle(a, b, c), triangle(a, c, d)];
  return [
    ...face(p(0, 0, 0), p(0, 1, 0), p(1, 1, 0), p(1, 0, 0)),
    ...face(p(0, 0, 1), p(1, 0, 1), p(1, 1, 1), p(0, 1, 1)),
    ...face(p(0, 0, 0), p(1, 0, 0), p(1, 0, 1), p(0, 0, 1)),
    ...face(p(0, 1, 0), p(0, 1, 1), p(1, 1, 1), p(1, 1, 0)),
    ...face(p(0, 0, 0), p(0, 0, 1), p(0, 1, 1), p(0, 1, 0)),
    ...face(p(1, 0, 0), p(1, 1, 0), p(1, 1, 1), p(1, 0, 1)),
  ];
}

/** A surface of revolution about z through a profile of [radius, height], rising; radius 0 at the ends closes it. */
export function turned(profile: readonly (readonly [number, number])[], around: number): Triangle[] {
  const at = (k: number, i: number): Point => {
    const [r, z] = profile[k] as readonly [number, number];
    if (r === 0) return [0, 0, z];
    const angle = (2 * Math.PI * (i % around)) / around;
    return [r * Math.cos(angle), r * Math.sin(angle), z];
  };
  const triangles: Triangle[] = [];
  for (let k = 0; k + 1 < profile.length; k++) {
    for (let i = 0; i < around; i++) {
      const [a, b, c, d] = [at(k, i), at(k, i + 1), at(k + 1, i + 1), at(k + 1, i)];
      if (profile[k]?.[0] !== 0) triangles.push(triangle(a, b, c));
      if (profile[k + 1]?.[0] !== 0) triangles.push(triangle(a, c, d));
    }
  }
  return triangles;
}

/** A torus about z: ring radius, tube radius. */
export function torus(ring: number, tube: number, around: number, across: number): Triangle[] {
  const at = (i: number, j: number): Point => {
    const u = (2 * Math.PI * (i % around)) / around;
    const w = (2 * Math.PI * (j % across)) / across;
    const r = ring + tube * Math.cos(w);
    return [r * Math.cos(u), r * Math.sin(u), tube * Math.sin(w)];
  };
  const triangles: Triangle[] = [];
  for (let i = 0; i < around; i++) {
    for (let j = 0; j < across; j++) {
      const [a, b, c, d] = [at(i, j), at(i + 1, j), at(i + 1, j + 1), at(i, j + 1)];
      triangles.push(triangle(a, b, c), triangle(a, c, d));
    }
  }
  return triangles;
}

export function moved(triangles: readonly Triangle[], [dx, dy, dz]: Point): Triangle[] {
  return triangles.map((t) => t.map((value, i) => value + [dx, dy, dz][i % 3]!) as unknown as Triangle);
}

export function turnedInsideOut(triangles: readonly Triangle[]): Triangle[] {
  return triangles.map(([a, b, c, d, e, f, g, h, i]) => [a, b, c, g, h, i, d, e, f]);
}

/** A binary STL; `header` fills the 80 bytes, `count` may lie. */
export function binaryStl(
  triangles: readonly Triangle[],
  { header = 'test', count = triangles.length } = {},
): Uint8Array {
  const bytes = new Uint8Array(84 + triangles.length * 50);
  bytes.set(new TextEncoder().encode(header).subarray(0, 80));
  const view = new DataView(bytes.buffer);
  view.setUint32(80, count, true);
  triangles.forEach((t, k) => t.forEach((value, i) => view.setFloat32(84 + k * 50 + 12 + i * 4, value, true)));
  return bytes;
}

/** An ASCII STL as text. */
export function asciiStl(triangles: readonly Triangle[], newline = '\n'): string {
  const facets = triangles.map((t) => {
    const corner = (i: number) => `      vertex ${t[i * 3]} ${t[i * 3 + 1]} ${t[i * 3 + 2]}`;
    return [
      '  facet normal 0 0 0',
      '    outer loop',
      corner(0),
      corner(1),
      corner(2),
      '    endloop',
      '  endfacet',
    ].join(newline);
  });
  return ['solid test', ...facets, 'endsolid test', ''].join(newline);
}

export const bytesOf = (text: string) => new TextEncoder().encode(text);
