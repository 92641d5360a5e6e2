import type { Triangle, Vec } from './solid';

/** Triangles with a normal at every corner: nine numbers a triangle in each list, mm. */
export interface Mesh {
  corners: Float32Array;
  normals: Float32Array;
}

const cross = (a: Vec, b: Vec): Vec => [
  a[1] * b[2] - a[2] * b[1],
  a[2] * b[0] - a[0] * b[2],
  a[0] * b[1] - a[1] * b[0],
];
const minus = (a: Vec, b: Vec): Vec => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
const dot = (a: Vec, b: Vec) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];

function unit(a: Vec): Vec {
  const length = Math.hypot(a[0], a[1], a[2]) || 1;
  return [a[0] / length, a[1] / length, a[2] / length];
}

/** Faces that meet at less than this (cosine) are one rounded surface; sharper ones stay an edge. */
const ROUNDED = Math.cos((24 * Math.PI) / 180);

/** A mesh of triangles, its normals smoothed over rounded surfaces. Faces must look outwards. */
export function meshOf(triangles: readonly Triangle[]): Mesh {
  const faces = triangles.map(([a, b, c]) => cross(minus(b, a), minus(c, a)));
  const units = faces.map(unit);
  const key = (p: Vec) => `${Math.round(p[0] * 50)},${Math.round(p[1] * 50)},${Math.round(p[2] * 50)}`;
  const meeting = new Map<string, number[]>();
  triangles.forEach((triangle, i) => {
    for (const corner of triangle) {
      const list = meeting.get(key(corner));
      if (list) list.push(i);
      else meeting.set(key(corner), [i]);
    }
  });
  const corners = new Float32Array(triangles.length * 9);
  const normals = new Float32Array(triangles.length * 9);
  triangles.forEach((triangle, i) => {
    triangle.forEach((corner, j) => {
      const sum: Vec = [0, 0, 0];
      for (const other of meeting.get(key(corner))!) {
        if (dot(units[other]!, units[i]!) < ROUNDED) continue;
        const face = faces[other]!;
        sum[0] += face[0];
        sum[1] += face[1];
        sum[2] += face[2];
      }
      corners.set(corner, i * 9 + j * 3);
      normals.set(unit(sum), i * 9 + j * 3);
    });
  });
  return { corners, normals };
}

/** Changes every corner; normals stay as they were, which is right for small changes. */
export function bent(mesh: Mesh, change: (corner: Vec, normal: Vec) => Vec): Mesh {
  const corners = new Float32Array(mesh.corners.length);
  for (let i = 0; i < corners.length; i += 3) {
    const corner: Vec = [mesh.corners[i]!, mesh.corners[i + 1]!, mesh.corners[i + 2]!];
    const normal: Vec = [mesh.normals[i]!, mesh.normals[i + 1]!, mesh.normals[i + 2]!];
    corners.set(change(corner, normal), i);
  }
  return { corners, normals: mesh.normals };
}

/** Several meshes as one. */
export function joined(...meshes: Mesh[]): Mesh {
  const put = (read: (mesh: Mesh) => Float32Array) => {
    const whole = new Float32Array(meshes.reduce((sum, mesh) => sum + mesh.corners.length, 0));
    let at = 0;
    for (const mesh of meshes) {
      whole.set(read(mesh), at);
      at += mesh.corners.length;
    }
    return whole;
  };
  return { corners: put((mesh) => mesh.corners), normals: put((mesh) => mesh.normals) };
}

/** A round rod from one place to another, its radius changing evenly, closed at both ends. */
export function rod(from: Vec, to: Vec, fromRadius: number, toRadius: number, around = 28): Mesh {
  const axis = unit(minus(to, from));
  const side = unit(cross(axis, Math.abs(axis[2]) < 0.9 ? [0, 0, 1] : [1, 0, 0]));
  const up = cross(axis, side);
  const ring = (centre: Vec, radius: number) =>
    Array.from({ length: around }, (_, i): Vec => {
      const turn = (i / around) * Math.PI * 2;
      const [s, u] = [Math.cos(turn) * radius, Math.sin(turn) * radius];
      return [0, 1, 2].map((k) => centre[k]! + side[k]! * s + up[k]! * u) as Vec;
    });
  const [a, b] = [ring(from, fromRadius), ring(to, toRadius)];
  const triangles = a.flatMap((p, i): Triangle[] => {
    const next = (i + 1) % around;
    return [
      [p, a[next]!, b[next]!],
      [p, b[next]!, b[i]!],
      [a[next]!, p, from],
      [b[i]!, b[next]!, to],
    ];
  });
  return meshOf(triangles);
}

/** Lowest and highest corner along each axis, mm. */
export function boundsOf({ corners }: Mesh): { low: Vec; high: Vec } {
  const low: Vec = [Infinity, Infinity, Infinity];
  const high: Vec = [-Infinity, -Infinity, -Infinity];
  for (let i = 0; i < corners.length; i += 1) {
    const axis = (i % 3) as 0 | 1 | 2;
    low[axis] = Math.min(low[axis], corners[i]!);
    high[axis] = Math.max(high[axis], corners[i]!);
  }
  return { low, high };
}
