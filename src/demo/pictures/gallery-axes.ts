import { smoothThrough } from '../../casting/plate/sweep';
import { hollowOf, swollen, withStub } from './castings';
import { type Flask, withFlasks } from './flask';
import { pouredCups } from './gallery-swords';
import { joined, rod } from './mesh';
import { groove } from './over';
import { HEIGHT, WIDTH } from './raster';
import type { Scene, Thing } from './scene';
import { onTheBench, type Shown } from './shots';
import { lying, type Stock } from './stock';

type Stocks = (slug: string) => Stock;

/** Both halves of a sand mould, open on the bench: the hollow, and the channel that leads to it. */
function openMould({ mesh, low, high }: Stock, axisUp = 0): Scene {
  const length = high[0] - low[0];
  const [halfWide, halfHigh] = [Math.max(high[1] + 26, 52), length / 2 + 30];
  const flasks: Flask[] = [-1, 1].map((side) => ({ x: side * (halfWide + 22), y: axisUp, halfWide, halfHigh }));
  const channel = joined(
    rod([low[0] + 3, 0, 0], [low[0] - 22, 0, 0], 7, 8),
    rod([low[0] - 22, 0, 0], [low[0] - 31, 0, 0], 9, 17),
  );
  const things = flasks.map((flask, index): Thing => {
    const half = hollowOf(joined(mesh, channel), index === 0 ? 'front' : 'back');
    const middle = (low[0] + high[0]) / 2;
    return { mesh: half, material: 'cavity', sunk: true, turn: Math.PI / 2, at: [flask.x, flask.y - middle], lift: 0 };
  });
  const camera = {
    middle: [0, 4] as [number, number],
    pxPerMm: Math.min(WIDTH / (halfWide * 5.4), HEIGHT / (halfHigh * 2.5)),
    tilt: 0.3,
  };
  return { ground: withFlasks(flasks), camera, things, over: () => [] };
}

/** A flat axe set in the cleft of a haft and bound with cord. */
function hafted(stock: Stock): Scene {
  const at = 34;
  const haft = joined(
    rod([at, -205, 1], [at, 8, 2], 12.5, 14.5),
    rod([at, 8, 2], [at, 48, 2], 17.5, 19),
    rod([at, 48, 2], [at, 54, 2], 19, 13),
  );
  const turns = [-32, -27, -22, -17, -12, 33, 38, 43].map((y) =>
    rod([at, y - 2.4, 2], [at, y + 2.4, 2], y < 0 ? 15.8 : 20, y < 0 ? 15.8 : 20),
  );
  const [axe] = [lying(stock.mesh, 'bright', [0, 0], -12)];
  const lift = 20;
  const set = { turn: axe.turn, at: axe.at, lift };
  const also: Thing[] = [
    { mesh: haft, material: 'wood', ...set },
    { mesh: joined(...turns), material: 'cord', ...set },
  ];
  const things = [{ ...axe, lift }, ...also];
  const scene = onTheBench([{ stock, material: 'bright', degrees: -12, plain: true }], {
    ground: 'cloth',
    also,
    framing: { fill: 0.9, tilt: 0.3, shift: [0, -0.02] },
  });
  return { ...scene, things };
}

/** A seam where two streams of metal met too cool to join, across the blade. */
function coldShut(stock: Stock): Scene {
  const mesh = swollen(withStub(stock, 9), 0.5, 0.9);
  const seam: [number, number][] = [-21, -16, -12, -7, -2, 3, 8, 13, 19].map((y, i) => [
    112 + [0, 2.5, 1, 3.4, 1.2, 3.8, 2.6, 5, 4.2][i]!,
    y,
  ]);
  return onTheBench([{ stock, mesh, material: 'cast', degrees: -14, plain: true }], {
    ground: 'board',
    framing: { fill: 0.8, shift: [0, -0.05] },
    bar: true,
    over: (camera, [thing]) =>
      [0.6, 0.9].map((width) => groove(smoothThrough(seam), stock.high[2] * 0.5, thing!, camera, width)),
  });
}

function rowOfSix(stock: Stock): Scene {
  const rough = swollen(withStub(stock, 8), 0.5, 0.8);
  const shown = [0, 1, 2, 3, 4, 5].map((i): Shown => {
    const fettled = i < 4;
    const place: [number, number] = [(i - 2.5) * 84, ((i * 5) % 3) * 5];
    const degrees = 84 + ((i * 7) % 5) * 3;
    return {
      stock,
      material: fettled ? 'filed' : 'cast',
      at: place,
      degrees,
      ...(fettled ? {} : { mesh: rough, plain: true }),
    };
  });
  return onTheBench(shown, { ground: 'board', framing: { fill: 0.9, tilt: 0.42, shift: [0, -0.02] } });
}

const pattern = (stock: Stock, degrees: number, ground: 'board' | 'slate', at: [number, number], size = 8): Scene =>
  onTheBench([{ stock, material: 'wax', degrees, mark: { at, size } }], {
    ground,
    framing: { fill: 0.7, shift: [0, -0.06] },
    bar: true,
  });

/** The pictures of the axes and palstaves, by name. */
export function axePictures(stocks: Stocks): [string, () => Scene][] {
  const [socketed, flat, palstave] = [stocks('socketed-axe'), stocks('flat-axe'), stocks('palstave')];
  const cups: [number, number][] = [-2, -1, 0, 1].map((i) => [i * 62 + 30, -26]);
  const lower: [number, number][] = [-1, 0, 1].map((i) => [i * 62 + 2, 34]);
  return [
    ['axe-pattern', () => pattern(socketed, -18, 'slate', [70, 0])],
    [
      'axe-final',
      () =>
        onTheBench([{ stock: socketed, material: 'bright', degrees: 22 }], {
          ground: 'cloth',
          framing: { fill: 0.68, tilt: 0.45 },
        }),
    ],
    ['flat-axe-pattern', () => pattern(flat, 12, 'board', [14, 0], 7)],
    ['flat-axe-mould', () => openMould(flat)],
    ['flat-axe-final', () => hafted(flat)],
    ['palstave-pattern', () => pattern(palstave, 16, 'slate', [86, 0])],
    ['palstave-mould', () => openMould(palstave)],
    ['palstaves-poured', () => pouredCups([...cups, ...lower], 12.5, 330)],
    ['palstave-cold-shut', () => coldShut(palstave)],
    ['palstaves-fettled', () => rowOfSix(palstave)],
  ];
}
