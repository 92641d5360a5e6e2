const SIZE = 256;

/** A number in [0, 1) that looks unrelated from one (x, y) to the next; the same on every machine. */
export function scattered(x: number, y: number, salt = 0): number {
  let h = Math.imul(x + 1, 0x9e3779b1) ^ Math.imul(y + 1, 0x85ebca6b) ^ Math.imul(salt + 1, 0xc2b2ae35);
  h = Math.imul(h ^ (h >>> 15), 0x2c1b3c6d);
  h = Math.imul(h ^ (h >>> 12), 0x297a2d39);
  return ((h ^ (h >>> 15)) >>> 0) / 4294967296;
}

const lattice = Float32Array.from({ length: SIZE * SIZE }, (_, i) => scattered(i % SIZE, Math.floor(i / SIZE)));

/** Smooth noise from 0 to 1 with one bump a unit; repeats every 256 units. */
export function noise(x: number, y: number): number {
  const [x0, y0] = [Math.floor(x), Math.floor(y)];
  const [fx, fy] = [x - x0, y - y0];
  const [u, v] = [fx * fx * (3 - 2 * fx), fy * fy * (3 - 2 * fy)];
  const left = x0 & 255;
  const right = (x0 + 1) & 255;
  const top = (y0 & 255) * SIZE;
  const bottom = ((y0 + 1) & 255) * SIZE;
  const a = lattice[top + left]! * (1 - u) + lattice[top + right]! * u;
  const b = lattice[bottom + left]! * (1 - u) + lattice[bottom + right]! * u;
  return a * (1 - v) + b * v;
}

/** A speck from 0 to 1 for a pixel: the grain of a film, cheaper than `scattered`. */
export function speck(x: number, y: number): number {
  return lattice[((y * 3) & 255) * SIZE + ((x + (y >> 8) * 37 + (x >> 8) * 91) & 255)]!;
}
