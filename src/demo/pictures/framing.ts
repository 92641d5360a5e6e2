import { type Camera, HEIGHT, place, type Placed, project, WIDTH } from './raster';

/** How a picture is framed: the share of it the pieces fill, the lean of the camera, and a shift in shares of it. */
export interface Framing {
  fill?: number;
  tilt?: number;
  shift?: [number, number];
}

/** A camera that shows all the pieces. */
export function framed(pieces: readonly Placed[], { fill = 0.74, tilt = 0.36, shift = [0, 0] }: Framing = {}): Camera {
  let camera: Camera = { middle: [0, 0], pxPerMm: 1, tilt };
  for (let pass = 0; pass < 4; pass += 1) {
    const seen = extent(pieces, camera);
    const pxPerMm =
      camera.pxPerMm * Math.min((fill * WIDTH) / (seen.x1 - seen.x0), (fill * HEIGHT) / (seen.y1 - seen.y0));
    const middle: [number, number] = [
      camera.middle[0] + ((seen.x0 + seen.x1) / 2 - WIDTH / 2) / camera.pxPerMm,
      camera.middle[1] + ((seen.y0 + seen.y1) / 2 - HEIGHT / 2) / camera.pxPerMm / Math.cos(tilt),
    ];
    camera = { ...camera, pxPerMm, middle };
  }
  const { middle, pxPerMm } = camera;
  return { ...camera, middle: [middle[0] - (shift[0] * WIDTH) / pxPerMm, middle[1] - (shift[1] * HEIGHT) / pxPerMm] };
}

function extent(pieces: readonly Placed[], camera: Camera) {
  const box = { x0: Infinity, x1: -Infinity, y0: Infinity, y1: -Infinity };
  for (const placed of pieces) {
    const { corners } = placed.mesh;
    for (let i = 0; i < corners.length; i += 9) {
      const [x, y] = project(place([corners[i]!, corners[i + 1]!, corners[i + 2]!], placed), camera);
      box.x0 = Math.min(box.x0, x);
      box.x1 = Math.max(box.x1, x);
      box.y0 = Math.min(box.y0, y);
      box.y1 = Math.max(box.y1, y);
    }
  }
  return box;
}
