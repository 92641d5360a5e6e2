import { misrun, swollen, withGates } from './castings';
import { framed } from './framing';
import { type MaterialName } from './materials';
import { joined, rod } from './mesh';
import { glow } from './over';
import { WIDTH } from './raster';
import type { Scene } from './scene';
import { onTheBench, type Shown } from './shots';
import { lying, type Stock } from './stock';

type Stocks = (slug: string) => Stock;

function waxSword(stock: Stock, degrees: number, marked = false): Shown {
  const stamped = { mark: { at: [78, 1.2] as [number, number], size: 7 } };
  return { stock, material: 'wax', degrees, ...(marked ? stamped : {}) };
}

/** The two customers' swords as waxes: the whole, and close views along it. */
function waxes(
  stock: Stock,
  who: 'rafe' | 'isolde',
  degrees: number,
  ground: 'board' | 'slate',
): [string, () => Scene][] {
  const close = (at: [number, number], wide: number, marked = false, turned = degrees) =>
    onTheBench([waxSword(stock, turned, marked)], { ground, close: { at, wide }, bar: true });
  return [
    [
      `${who}-wax`,
      () => onTheBench([waxSword(stock, degrees)], { ground, framing: { fill: 0.86, shift: [0, -0.05] }, bar: true }),
    ],
    [`${who}-wax-grip`, () => close([72, 0], 210, false, degrees + 12)],
    [`${who}-wax-tip`, () => close([560, 0], 190, false, degrees - 14)],
    [`${who}-wax-mark`, () => close([80, 0], 92, true, degrees + 4)],
  ];
}

function shell(stock: Stock): Scene {
  const mesh = swollen(withGates(stock, 7, 26), 7, 4);
  const things = [lying(mesh, 'shell', [0, 0], -17)];
  return { ground: 'slate', camera: framed(things, { fill: 0.84, tilt: 0.5 }), things, over: () => [] };
}

/** A cup of metal just poured, in sand, with the light going out around it. */
export function pouredCups(places: readonly [number, number][], radius: number, wide: number): Scene {
  const rims = places.map(([x, y]) => ({
    mesh: joined(
      rod([0, 0, -6], [0, 0, 2.5], radius * 1.34, radius * 1.28),
      rod([0, 0, 2.5], [0, 0, 2.6], radius * 1.28, radius * 1.05),
    ),
    material: 'shell' as MaterialName,
    at: [x, y] as [number, number],
    turn: 0,
    lift: 0,
  }));
  const camera = { middle: [0, 0] as [number, number], pxPerMm: WIDTH / wide, tilt: 0.55 };
  const over = () => places.map((place, index) => glow([place[0], place[1] - 1.5], radius, camera, `g${index}`));
  return { ground: 'sand', camera, things: rims, over, daylight: 0.34 };
}

function failed(stock: Stock, close: boolean): Scene {
  const mesh = swollen(withGates({ ...stock, mesh: misrun(stock, 48) }, 7, 26), 0.6, 1.6);
  const shown: Shown = { stock, mesh, material: 'cast', degrees: close ? -22 : 14, plain: true };
  if (close) return onTheBench([shown], { ground: 'slate', close: { at: [556, 0], wide: 165 }, bar: true });
  return onTheBench([shown], { ground: 'slate', framing: { fill: 0.86, shift: [0, -0.04] }, bar: true });
}

/** The pictures of both sword commissions, by name. */
export function swordPictures(stocks: Stocks): [string, () => Scene][] {
  const sword = stocks('leaf-shaped-sword');
  return [
    ...waxes(sword, 'rafe', -24, 'slate').slice(0, 2),
    ...waxes(sword, 'isolde', 16, 'board'),
    ['isolde-shell', () => shell(sword)],
    ['isolde-poured', () => pouredCups([[14, 4]], 21, 215)],
    ['isolde-misrun', () => failed(sword, false)],
    ['isolde-misrun-close', () => failed(sword, true)],
  ];
}
