// The specification, section 2: the stage shown to the customer is that of the least advanced piece, with how many are beyond it.
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { runnerOf, type RunnerFacts } from '../../src/commission/making/customer-runner';
import { DEAL_STATES } from '../../src/commission/deal';
import { routeFor, type PieceStage } from '../../src/commission/making/making';

const route = routeFor({ pattern: true, harden: true, patinate: false, haft: false });
const facts = (stages: readonly PieceStage[], more: Partial<RunnerFacts> = {}): RunnerFacts => ({
  deal: 'making',
  pieces: stages.map((stage) => ({ route, stage })),
  reachedOn: {},
  gateA: 'none',
  scrapped: 0,
  dayWords: (day) => `on ${day}`,
  ...more,
});
const states = (given: RunnerFacts) => runnerOf(given).map((step) => step.state);

describe('the runner', () => {
  it('is all ahead before anything is booked', () => {
    for (const deal of ['enquiry', 'quoted', 'agreed', 'lapsed', 'declined'] as const) {
      expect(states(facts(['waiting'], { deal }))).toEqual(Array(6).fill('ahead'));
    }
    expect(states(facts([]))).toEqual(Array(6).fill('ahead'));
  });

  it('warms the first gate that is not passed and says when the others were', () => {
    const steps = runnerOf(
      facts(['poured'], { reachedOn: { approved: '2027-04-02', pattern: '2027-03-30', mould: '2027-04-09' } }),
    );
    expect(steps.map(({ name, state, note }) => [name, state, note])).toEqual([
      ['Pattern', 'done', 'You approved it on 2027-04-02'],
      ['Mould', 'done', 'Made on 2027-04-09'],
      ['Pour', 'hot', undefined],
      ['Finishing', 'ahead', undefined],
      ['Inspection', 'ahead', undefined],
      ['Dispatch', 'ahead', undefined],
    ]);
    expect(steps[2]!.share).toBe(0.5);
  });

  it('holds the pattern hot until the customer has approved it', () => {
    const [pattern, mould] = runnerOf(facts(['pattern'], { gateA: 'open' }));
    expect([pattern!.state, pattern!.note, mould!.state]).toEqual(['hot', 'Waiting for your look', 'ahead']);
    expect(states(facts(['pattern'], { gateA: 'approved' })).slice(0, 2)).toEqual(['done', 'hot']);
  });

  it('stands at the least advanced of several pieces and counts those beyond', () => {
    const steps = runnerOf(facts(['fettled', 'sound', 'sound', 'poured', 'finished', 'finished']));
    expect(steps[2]).toMatchObject({ name: 'Pour', state: 'hot', note: '5 of 6' });
    expect(steps[3]).toMatchObject({ state: 'ahead' });
  });

  it('tells re-pours honestly, and no more than there were', () => {
    const pour = (scrapped: number) => runnerOf(facts(['sound'], { scrapped }))[2]!.note;
    expect([pour(0), pour(1), pour(3)]).toEqual(['Sound', 'Sound, after 1 re-pour', 'Sound, after 3 re-pours']);
  });

  it('leaves out a gate that no piece passes', () => {
    const plain = routeFor({ pattern: false, harden: false, patinate: false, haft: false });
    expect(runnerOf(facts([], { pieces: [{ route: plain, stage: 'waiting' }] })).map((step) => step.state)).toEqual([
      'skipped',
      'hot',
      'ahead',
      'ahead',
      'ahead',
      'ahead',
    ]);
  });

  it('ends with the parcel on its way', () => {
    const sent = runnerOf(facts(['packed'], { deal: 'sent', reachedOn: { sent: '2027-06-01' } }));
    expect(sent.map((step) => step.state)).toEqual(Array(6).fill('done'));
    expect(sent[5]!.note).toBe('Sent on 2027-06-01');
    expect(states(facts(['packed'], { deal: 'finished' })).at(-1)).toBe('hot');
  });

  it('always has six steps, at most one of them hot, and nothing done behind it', () => {
    const anyStage = fc.constantFrom<PieceStage>('waiting', ...route);
    fc.assert(
      fc.property(fc.constantFrom(...DEAL_STATES), fc.array(anyStage, { maxLength: 6 }), (deal, stages) => {
        const list = states(facts(stages, { deal }));
        expect(list).toHaveLength(6);
        const hot = list.indexOf('hot');
        expect(list.filter((state) => state === 'hot').length).toBeLessThanOrEqual(1);
        const started = hot < 0 ? [] : list.slice(0, hot);
        expect(started.every((state) => state === 'done')).toBe(true);
      }),
    );
  });

  it('never goes back when a piece goes on', () => {
    const done = (list: string[]) => list.filter((state) => state === 'done').length;
    for (let place = 1; place < route.length; place += 1) {
      expect(done(states(facts([route[place]!])))).toBeGreaterThanOrEqual(done(states(facts([route[place - 1]!]))));
    }
  });
});
