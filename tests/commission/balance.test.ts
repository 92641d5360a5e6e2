// The specification, section 2 (3): paid, owed and overdue are computed from the ledger. Worked example 1: 660.00 + 546.00 + 1,492.80.
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { balanceOf, type AgreedStage, type LedgerLine } from '../../src/commission/balance';

const NOW = new Date('2027-03-10T12:00:00Z');
const day = (days: number) => new Date(NOW.getTime() + days * 86_400_000);
const stage = (position: number, grossMinor: number, dueAt: Date | null = null): AgreedStage => ({
  id: `stage-${position}`,
  position,
  label: `Stage ${position}`,
  currency: 'GBP',
  grossMinor,
  dueAt,
});
const line = (stagePaymentId: string | null, amountMinor: number, more: Partial<LedgerLine> = {}): LedgerLine => ({
  stagePaymentId,
  kind: 'received',
  amountMinor,
  currency: 'GBP',
  ...more,
});
const SWORD = [stage(1, 66_000, day(3)), stage(2, 54_600), stage(3, 149_280)];
const none: ReadonlySet<string> = new Set();

describe('a balance', () => {
  it('before any payment owes everything, of which the first stage is due', () => {
    expect(balanceOf(SWORD, [], none, NOW)).toMatchObject({
      agreedMinor: 269_880,
      receivedMinor: 0,
      toComeMinor: 269_880,
      dueMinor: 66_000,
      overdueMinor: 0,
      stages: [{ state: 'due' }, { state: 'later' }, { state: 'later' }],
    });
  });

  it('after two stages has 1,492.80 to come', () => {
    const paid = balanceOf(SWORD, [line('stage-1', 66_000), line('stage-2', 54_600)], none, NOW);
    expect(paid).toMatchObject({ receivedMinor: 120_600, toComeMinor: 149_280, dueMinor: 0 });
    expect(paid.stages.map((each) => each.state)).toEqual(['paid', 'paid', 'later']);
  });

  it('is overdue the instant after its day, and on its way while a bank payment runs', () => {
    const at = (dueAt: Date) => balanceOf([stage(1, 100, dueAt)], [], none, NOW).stages[0]!.state;
    expect([at(NOW), at(new Date(NOW.getTime() - 1)), at(day(-9))]).toEqual(['due', 'overdue', 'overdue']);
    const running = balanceOf([stage(1, 100, day(-9))], [], new Set(['stage-1']), NOW);
    expect(running).toMatchObject({
      stages: [{ state: 'on-its-way' }],
      dueMinor: 0,
      overdueMinor: 0,
      toComeMinor: 100,
    });
  });

  it('keeps what fits no stage apart, each currency by itself, and fees out of it', () => {
    const ledger = [
      line(null, 500),
      line('stage-of-another-quote', 300),
      line(null, 700, { currency: 'EUR' }),
      line('stage-1', 900, { currency: 'EUR' }),
      line('stage-1', -25, { kind: 'fee' }),
    ];
    expect(balanceOf([stage(1, 1_000, day(1))], ledger, none, NOW)).toMatchObject({
      receivedMinor: 0,
      unmatchedMinor: 800,
      foreign: [{ currency: 'EUR', minor: 1_600 }],
      toComeMinor: 1_000,
    });
  });

  it('without a quote is nothing, in the currency of what came in', () => {
    expect(balanceOf([], [], none, NOW)).toMatchObject({ currency: 'GBP', agreedMinor: 0, stages: [] });
    expect(balanceOf([], [line(null, 5, { currency: 'EUR' })], none, NOW)).toMatchObject({
      currency: 'EUR',
      unmatchedMinor: 5,
    });
  });
});

describe('laws of a balance', () => {
  const anyStages = fc
    .array(
      fc.record({ gross: fc.integer({ min: 1, max: 500_000 }), due: fc.option(fc.integer({ min: -40, max: 40 })) }),
      {
        minLength: 1,
        maxLength: 6,
      },
    )
    .map((list) => list.map(({ gross, due }, place) => stage(place + 1, gross, due === null ? null : day(due))));
  const anyLedger = fc.array(
    fc.record({
      stagePaymentId: fc.constantFrom('stage-1', 'stage-2', 'stage-9', null),
      kind: fc.constantFrom('received' as const, 'fee' as const),
      amountMinor: fc.integer({ min: 1, max: 300_000 }),
      currency: fc.constantFrom('GBP', 'EUR'),
    }),
    { maxLength: 12 },
  );

  it('every penny received is on a stage, unmatched, or foreign; none is counted twice', () => {
    fc.assert(
      fc.property(anyStages, anyLedger, (stages, ledger) => {
        const result = balanceOf(stages, ledger, none, NOW);
        const received = ledger.filter((each) => each.kind === 'received');
        const total = received.reduce((sum, each) => sum + each.amountMinor, 0);
        const foreign = result.foreign.reduce((sum, each) => sum + each.minor, 0);
        expect(result.receivedMinor + result.unmatchedMinor + foreign).toBe(total);
      }),
    );
  });

  it('stages sum to the whole, what is due is part of what is to come, and overdue part of that', () => {
    fc.assert(
      fc.property(anyStages, anyLedger, (stages, ledger) => {
        const result = balanceOf(stages, ledger, none, NOW);
        expect(result.stages.reduce((sum, each) => sum + each.grossMinor, 0)).toBe(result.agreedMinor);
        expect(result.overdueMinor).toBeLessThanOrEqual(result.dueMinor);
        expect(result.dueMinor).toBeLessThanOrEqual(result.toComeMinor);
        for (const each of result.stages) {
          expect(each.owedMinor).toBe(Math.max(0, each.grossMinor - each.paidMinor));
          expect(each.state === 'paid').toBe(each.owedMinor === 0);
        }
      }),
    );
  });

  it('the order of the ledger’s lines and of the stages does not matter', () => {
    fc.assert(
      fc.property(anyStages, anyLedger, (stages, ledger) => {
        const turned = balanceOf([...stages].reverse(), [...ledger].reverse(), none, NOW);
        const straight = balanceOf(stages, ledger, none, NOW);
        expect({ ...turned, foreign: 0, currency: '' }).toEqual({ ...straight, foreign: 0, currency: '' });
      }),
    );
  });
});
