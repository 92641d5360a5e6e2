import type { Triangle } from './stl-problems';

/** A running sum that keeps what rounding drops (Neumaier's compensated summation). */
function createSum() {
  let sum = 0;
  let dropped = 0;
  return {
    add(value: number): void {
      const next = sum + value;
      dropped += Math.abs(sum) >= Math.abs(value) ? sum - next + value : value - next + sum;
      sum = next;
    },
    value: () => sum + dropped,
  };
}

/**
 * Signed volume, area and box of triangles, in the file's unit. The volume is the sum of signed tetrahedra from the first
 * corner seen, so that a solid far from the origin loses no digits; it means something only for a closed surface.
 * Exact formula: det(a, b, c) / 6 for each triangle.
 */
export function createTriangleSums() {
  const volume = createSum();
  const area = createSum();
  let origin: [number, number, number] | null = null;
  const least = [Infinity, Infinity, Infinity];
  const most = [-Infinity, -Infinity, -Infinity];

  return {
    /** Adds a triangle of finite corners and says whether it has any area. */
    add(t: Triangle): boolean {
      origin ??= [t[0], t[1], t[2]];
      const [ox, oy, oz] = origin;
      for (let i = 0; i < 9; i++) {
        const value = t[i] as number;
        if (value < (least[i % 3] as number)) least[i % 3] = value;
        if (value > (most[i % 3] as number)) most[i % 3] = value;
      }
      const [ux, uy, uz] = [t[3] - t[0], t[4] - t[1], t[5] - t[2]];
      const [vx, vy, vz] = [t[6] - t[0], t[7] - t[1], t[8] - t[2]];
      const [nx, ny, nz] = [uy * vz - uz * vy, uz * vx - ux * vz, ux * vy - uy * vx];
      const twice = Math.sqrt(nx * nx + ny * ny + nz * nz);
      area.add(twice / 2);
      volume.add(((t[0] - ox) * nx + (t[1] - oy) * ny + (t[2] - oz) * nz) / 6);
      return twice > 0;
    },
    volume: volume.value,
    area: area.value,
    /** Length, width and height of the box; zeros when nothing was added. */
    box: (): [number, number, number] => {
      const side = (axis: number) => Math.max(0, (most[axis] as number) - (least[axis] as number));
      return origin ? [side(0), side(1), side(2)] : [0, 0, 0];
    },
  };
}
