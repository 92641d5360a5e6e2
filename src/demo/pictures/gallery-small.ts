import type { Body } from '../../casting/drawing';
import { type Mesh, meshOf } from './mesh';
import type { Scene, Thing } from './scene';
import { onTheBench } from './shots';
import { skinsOf } from './solid';
import { lying, type Stock } from './stock';

type Stocks = (slug: string) => Stock;

/** A dagger's wooden hilt, from its pommel to where it holds the butt of the blade; mm along the blade's own axis. */
const HILT: Body = {
  name: 'hilt',
  stations: [
    { at: -104, width: 44, thickness: 26 },
    { at: -92, width: 47, thickness: 27 },
    { at: -82, width: 29, thickness: 23 },
    { at: -50, width: 25, thickness: 22 },
    { at: -18, width: 29, thickness: 22 },
    { at: 6, width: 50, thickness: 20 },
    { at: 27, width: 64, thickness: 17 },
    { at: 38, width: 60, thickness: 15 },
  ],
  ends: { start: { cap: 7 }, end: { bulge: -9 } },
};

function hiltMesh(): Mesh {
  return meshOf(skinsOf({ bodies: [HILT], sections: {}, knops: [] }, 60));
}

function dagger(
  stock: Stock,
  material: 'bright' | 'stained',
  degrees: number,
  ground: 'cloth' | 'board',
  bar: boolean,
): Scene {
  const blade = lying(stock.mesh, material, [0, 0], degrees);
  const also: Thing[] = [{ mesh: hiltMesh(), material: 'wood', turn: blade.turn, at: blade.at, lift: 14 }];
  const scene = onTheBench([{ stock, material, degrees, holes: 'riveted' }], {
    ground,
    also,
    bar,
    framing: { fill: 0.84, shift: [0, -0.03] },
  });
  return { ...scene, things: [{ ...blade, lift: 14 }, ...also] };
}

function spears(stock: Stock, material: 'wax' | 'bright', ground: 'slate' | 'cloth', bar: boolean): Scene {
  const stamped = material === 'wax' ? { mark: { at: [34, 0] as [number, number], size: 5.5 } } : {};
  return onTheBench(
    [
      { stock, material, at: [-4, -34], degrees: material === 'wax' ? 5 : -9, ...stamped },
      { stock, material, at: [6, 30], degrees: material === 'wax' ? -3 : 7, ...stamped },
    ],
    { ground, bar, framing: { fill: 0.66, shift: [0, bar ? -0.06 : 0] } },
  );
}

function mace(stock: Stock, degrees: number, close?: { at: [number, number]; wide: number }, marked = false): Scene {
  const stamped = { mark: { at: [4.4, -1.5] as [number, number], size: 3.4 } };
  return onTheBench([{ stock, material: 'wax', degrees, ...(marked ? stamped : {}) }], {
    ground: 'board',
    framing: { fill: 0.66, shift: [0, -0.05] },
    bar: close === undefined,
    ...(close ? { close } : {}),
  });
}

/** The pictures of the dagger, the spearheads and the mace head, by name. */
export function smallPictures(stocks: Stocks): [string, () => Scene][] {
  const [blade, spear, head] = [stocks('riveted-dagger'), stocks('spearhead'), stocks('knopped-mace-head')];
  return [
    [
      'dagger-wax',
      () =>
        onTheBench([{ stock: blade, material: 'wax', degrees: -14, mark: { at: [48, 0], size: 7 } }], {
          ground: 'board',
          framing: { fill: 0.74, shift: [0, -0.05] },
          bar: true,
        }),
    ],
    ['dagger-final', () => dagger(blade, 'bright', 18, 'cloth', false)],
    ['dagger-back', () => dagger(blade, 'stained', -16, 'board', true)],
    ['spears-pattern', () => spears(spear, 'wax', 'slate', true)],
    ['spears-final', () => spears(spear, 'bright', 'cloth', false)],
    ['mace-wax', () => mace(head, 0)],
    ['mace-wax-turned', () => mace(head, -52)],
    ['mace-wax-close', () => mace(head, 8, { at: [38, 4], wide: 74 })],
    ['mace-wax-mark', () => mace(head, -62, { at: [10, 0], wide: 74 }, true)],
  ];
}
