import { readStl } from '../../src/casting/stl';

/** A million triangles are measured while somebody waits for the upload to be confirmed. */
const PROMISE = 5_000;
const [AROUND, ALONG] = [1000, 500];

const bytes = torus(30, 10);
const times: number[] = [];
let volume = 0;
for (let round = 0; round < 5; round += 1) {
  const begun = performance.now();
  const result = readStl(bytes);
  times.push(performance.now() - begun);
  if (!result.ok) throw new Error(result.problem.code);
  volume = result.measure.volumeMm3 ?? 0;
}
// Pappus: the smooth torus has volume 2 pi^2 R r^2; this polyhedron lies just inside it.
const smooth = 2 * Math.PI ** 2 * 30 * 10 ** 2;
const slowest = Math.max(...times);
console.log(
  `STL of ${AROUND * ALONG * 2} triangles, ${(bytes.length / 1e6).toFixed(0)} MB: ${times.map((t) => t.toFixed(0)).join(', ')} ms`,
);
console.log(`volume ${volume.toFixed(3)} mm3, ${(100 * (1 - volume / smooth)).toFixed(4)} % under the smooth torus`);
console.log(`promised within ${PROMISE} ms: ${slowest <= PROMISE ? 'kept' : 'BROKEN'}`);
process.exitCode = slowest <= PROMISE && volume < smooth && volume > 0.9999 * smooth ? 0 : 1;

/** A binary STL of a torus with the given radii in mm. */
function torus(ring: number, tube: number): Uint8Array {
  const triangles = AROUND * ALONG * 2;
  const buffer = new ArrayBuffer(84 + 50 * triangles);
  const view = new DataView(buffer);
  view.setUint32(80, triangles, true);
  let at = 84;
  const corner = (i: number, j: number, offset: number) => {
    const [u, v] = [(2 * Math.PI * (i % AROUND)) / AROUND, (2 * Math.PI * (j % ALONG)) / ALONG];
    const reach = ring + tube * Math.cos(v);
    [reach * Math.cos(u), reach * Math.sin(u), tube * Math.sin(v)].forEach((value, axis) =>
      view.setFloat32(offset + 4 * axis, value, true),
    );
  };
  const facet = (...corners: [number, number][]) => {
    corners.forEach(([i, j], index) => corner(i, j, at + 12 + 12 * index));
    at += 50;
  };
  for (let i = 0; i < AROUND; i += 1) {
    for (let j = 0; j < ALONG; j += 1) {
      facet([i, j], [i + 1, j], [i + 1, j + 1]);
      facet([i, j], [i + 1, j + 1], [i, j + 1]);
    }
  }
  return new Uint8Array(buffer);
}
