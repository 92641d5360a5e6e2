// The specification, section 2 (2): the order of a piece's stages; unused stages are struck out in the quote.
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { costLine } from '../../src/commission/pricing/cost-lines';
import {
  hasReached,
  leastAdvanced,
  nextStage,
  PIECE_STAGES,
  routeFor,
  SCRAP_CAUSES,
  STAGE_ACTS,
  STAGE_OPERATIONS,
  stageAfterScrap,
} from '../../src/commission/making/making';
import { routeOfPiece, routeOptionsOf } from '../../src/commission/making/route-of-quote';
import { palstaves, swordFromFile } from '../../src/demo/drafts';

const ORDER = [
  'mould',
  'poured',
  'sound',
  'fettled',
  'hardened',
  'finished',
  'patinated',
  'hafted',
  'inspected',
  'packed',
];
const options = fc.record({ pattern: fc.boolean(), harden: fc.boolean(), patinate: fc.boolean(), haft: fc.boolean() });

describe('a route', () => {
  it('with everything in it is the order of the trade, after the pattern', () => {
    expect(routeFor({ pattern: true, harden: true, patinate: true, haft: true })).toEqual(['pattern', ...ORDER]);
  });

  it('keeps the order whatever is left out, never leaves out casting, inspection and packing, and ends', () => {
    fc.assert(
      fc.property(options, (chosen) => {
        const route = routeFor(chosen);
        expect(route).toEqual(['pattern', ...ORDER].filter((stage) => (route as string[]).includes(stage)));
        for (const stage of ['mould', 'poured', 'sound', 'fettled', 'finished', 'inspected', 'packed'] as const) {
          expect(route).toContain(stage);
        }
        const walked: string[] = [];
        for (let at = nextStage(route, 'waiting'); at; at = nextStage(route, at)) walked.push(at);
        expect(walked).toEqual(route);
      }),
    );
  });

  it('tells what lies behind a piece, and where it goes when its casting is scrapped', () => {
    fc.assert(
      fc.property(options, (chosen) => {
        const route = routeFor(chosen);
        route.forEach((at, place) => {
          expect(route.filter((stage) => hasReached(route, at, stage))).toEqual(route.slice(0, place + 1));
        });
        expect(hasReached(route, 'waiting', 'mould')).toBe(false);
        expect(nextStage(route, stageAfterScrap(route))).toBe('mould');
      }),
    );
    expect(hasReached(['mould'], 'mould', 'hafted')).toBe(false);
    expect(nextStage(['mould'], 'hafted')).toBeNull();
  });

  it('of several pieces is shown at the least advanced', () => {
    expect(leastAdvanced(['fettled', 'sound', 'packed'])).toEqual({ stage: 'sound', beyond: 2 });
    expect(leastAdvanced(['sound', 'sound'])).toEqual({ stage: 'sound', beyond: 0 });
    expect(leastAdvanced([])).toEqual({ stage: 'waiting', beyond: 0 });
  });
});

describe('the route of a quote', () => {
  it('of the worked sword has a gate and hardened edges, and neither patina nor haft', () => {
    expect(routeOfPiece(swordFromFile().lines, 1)).toEqual([
      'pattern',
      'mould',
      'poured',
      'sound',
      'fettled',
      'hardened',
      'finished',
      'inspected',
      'packed',
    ]);
  });

  it('of the six palstaves hafts the first four', () => {
    const { lines } = palstaves();
    const hafted = [1, 2, 3, 4, 5, 6].map((number) => routeOfPiece(lines, number).includes('hafted'));
    expect(hafted).toEqual([true, true, true, true, false, false]);
  });

  it('strikes out a stage whose line takes no time', () => {
    const line = (id: string, group: 'before-gate' | 'hand', minutes: number) =>
      costLine({ id, label: id, group, minutes });
    expect(
      routeOptionsOf([
        line('gate-a', 'before-gate', 0),
        line('edge', 'hand', 0),
        line('patina', 'hand', 45),
        line('haft', 'hand', 90),
        line('edge', 'before-gate', 30),
      ]),
    ).toEqual({ pattern: false, harden: false, patinate: true, haft: true });
  });
});

it('every stage has an act and an operation, every cause a name and a plain sentence', () => {
  for (const stage of PIECE_STAGES) {
    expect(STAGE_ACTS[stage], stage).toMatch(/^[A-Z]/);
    expect(STAGE_OPERATIONS[stage], stage).toMatch(/^[A-Z]/);
  }
  for (const { name, plain } of Object.values(SCRAP_CAUSES)) {
    expect(name.length).toBeGreaterThan(3);
    expect(plain).toMatch(/^[A-Z].*\.$/);
    expect(plain).not.toMatch(/you|fault of|sorry/i);
  }
});
