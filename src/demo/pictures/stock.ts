import type { Drawing } from '../../casting/drawing';
import { drawingOf } from '../forms';
import type { MaterialName } from './materials';
import { boundsOf, type Mesh, meshOf } from './mesh';
import type { Thing } from './scene';
import { skinsOf, type Vec } from './solid';

/** A form as the pictures use it: its drawing, its mesh with the middle of its length at 0, its size in mm. */
export interface Stock {
  drawing: Drawing;
  mesh: Mesh;
  low: Vec;
  high: Vec;
}

/** The forms of the catalogue as meshes, each made once. */
export function openStock(contentFolder: string): (slug: string) => Stock {
  const known = new Map<string, Stock>();
  return (slug) => {
    const found = known.get(slug);
    if (found) return found;
    const drawing = drawingOf(contentFolder, slug);
    const mesh = meshOf(skinsOf(drawing));
    const stock = { drawing, mesh, ...boundsOf(mesh) };
    known.set(slug, stock);
    return stock;
  };
}

/** Where a mesh lies: the middle of its length over `at`, turned, resting on the bench. Degrees. */
export function lying(mesh: Mesh, material: MaterialName, at: [number, number] = [0, 0], degrees = 0): Thing {
  const { low, high } = boundsOf(mesh);
  const turn = (degrees * Math.PI) / 180;
  const half = (low[0] + high[0]) / 2;
  return {
    mesh,
    material,
    turn,
    at: [at[0] - half * Math.cos(turn), at[1] - half * Math.sin(turn)],
    lift: -low[2],
  };
}
