import { noise } from './noise';
import { bent, type Mesh, rod, joined } from './mesh';
import type { Vec } from './solid';
import type { Stock } from './stock';

/** A wax or casting a little over its size all round, mm: a shell, or metal before the file. */
export function swollen(mesh: Mesh, by: number, rough = 0): Mesh {
  return bent(mesh, ([x, y, z], [nx, ny, nz]) => {
    const k = by + (noise(x * 0.14 + 20, y * 0.2 + z * 0.2 + 20) - 0.5) * rough;
    return [x + nx * k, y + ny * k, z + nz * k];
  });
}

/** The runner and cup through which a mould was filled, at the low end of the piece. */
export function withGates({ mesh, low }: Stock, radius: number, reach: number): Mesh {
  const start = low[0];
  const runner = rod([start + radius, 0, 0], [start - reach, 0, 0], radius, radius * 1.15);
  const cup = rod([start - reach, 0, 0], [start - reach - radius * 4.4, 0, 0], radius * 1.2, radius * 3.1);
  const lip = rod(
    [start - reach - radius * 4.4, 0, 0],
    [start - reach - radius * 4.9, 0, 0],
    radius * 3.1,
    radius * 2.6,
  );
  return joined(mesh, runner, cup, lip);
}

/** The stub that is left when the gates are sawn off. */
export function withStub({ mesh, low }: Stock, radius: number): Mesh {
  return joined(mesh, rod([low[0] + radius, 0, 0], [low[0] - radius * 1.4, 0, 0], radius, radius * 0.96));
}

/** A casting that froze before the mould was full: it ends short in a rounded, uneven edge, `short` mm from its end. */
export function misrun({ mesh, high }: Stock, short: number): Mesh {
  const end = high[0] - short;
  return bent(mesh, ([x, y, z]): Vec => {
    const edge = end - 4 + noise(y * 0.1 + 11, 3) * 11 - y * y * 0.04;
    if (x < edge - 5) return [x, y, z];
    const left = Math.max(0, 1 - Math.max(0, x - (edge - 5)) / 5);
    return [Math.min(x, edge), y, z * Math.sqrt(1 - (1 - left) ** 2)];
  });
}

/** The hollow that one half of a sand mould holds: the face of the piece turned downwards, and what leads to it. */
export function hollowOf(mesh: Mesh, face: 'front' | 'back'): Mesh {
  const sign = face === 'front' ? 1 : -1;
  const keptCorners: number[] = [];
  const keptNormals: number[] = [];
  for (let i = 0; i < mesh.corners.length; i += 9) {
    const heights = [mesh.corners[i + 2]!, mesh.corners[i + 5]!, mesh.corners[i + 8]!].map((z) => z * sign);
    if (Math.max(...heights) <= 0) continue;
    for (let k = 0; k < 9; k += 3) {
      keptCorners.push(
        mesh.corners[i + k]!,
        mesh.corners[i + k + 1]! * sign,
        -Math.max(0, mesh.corners[i + k + 2]! * sign),
      );
      keptNormals.push(-mesh.normals[i + k]!, -mesh.normals[i + k + 1]! * sign, mesh.normals[i + k + 2]! * sign);
    }
  }
  return { corners: Float32Array.from(keptCorners), normals: Float32Array.from(keptNormals) };
}
