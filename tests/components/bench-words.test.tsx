// The specification, section 1: an apprentice is "to be told what next"; section 2: no mould before gate A, packing after T31.
import { expect, test } from 'vitest';
import { routeFor, nextStage, STAGE_OPERATIONS, STAGE_ACTS, type PieceStage } from '../../src/commission/making/making';
import { nextInHand } from '../../src/components/bench/bench-words';
import { stageName } from '../../src/components/bench/stages';

const route = routeFor({ pattern: true, harden: false, patinate: false, haft: false });
const piece = (stage: PieceStage, number = 1) => {
  const next = nextStage(route, stage);
  const operation = STAGE_OPERATIONS[next ?? 'packed'];
  const masses = { targetMassG: null, toleranceG: null, measuredG: null };
  return { number, stage, route, next, nextAct: next && STAGE_ACTS[next], operation, ...masses };
};
const said = (stages: PieceStage[], more: Partial<Parameters<typeof nextInHand>[0]> = {}) =>
  nextInHand({
    deal: 'making',
    gateA: 'approved',
    pieces: stages.map((stage, index) => piece(stage, index + 1)),
    ...more,
  });

test.each<[PieceStage[], Partial<Parameters<typeof nextInHand>[0]>, string]>([
  [['waiting'], { deal: 'booked', gateA: 'none' }, 'Next: pattern and wax'],
  [['pattern'], { gateA: 'open' }, 'Waits for the customer to approve the pattern'],
  [['pattern'], {}, 'Next: moulding'],
  [['fettled', 'sound', 'sound', 'finished'], {}, 'Next: fettling, 2 of 4 pieces'],
  [['inspected', 'inspected'], {}, 'Next: tell the customer that it is finished'],
  [['inspected', 'packed'], { deal: 'finished' }, 'Next: packing, 1 of 2 pieces'],
  [['packed'], { deal: 'finished' }, 'Packed, to be sent'],
])('%j %j: %s', (stages, more, sentence) => expect(said(stages, more)).toBe(sentence));

test('a piece’s own button says what it has reached', () => {
  expect((['waiting', 'mould', 'hardened'] as const).map(stageName)).toEqual(['Not begun', 'Mould', 'hardened']);
});
