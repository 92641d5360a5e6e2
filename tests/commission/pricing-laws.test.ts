import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { ceilToStep, floorToStep, formatMoney, halfUp, allocate, share } from '../../src/commission/money';
import { costQuantile, listOutcomes } from '../../src/commission/pricing/cost-distribution';
import { cancellationStatement } from '../../src/commission/pricing/cancellation';
import { priceWithMargin } from '../../src/commission/pricing/price';
import { priceQuote } from '../../src/commission/pricing/quote';
import type { QuoteDraft } from '../../src/commission/pricing/quote-draft';
import { palstaves, swordFromFile } from '../../src/demo/drafts';

const sum = (values: readonly number[]) => values.reduce((a, b) => a + b, 0);

/** Drafts of all sizes and risks, from a few small axes to many dear blades. */
const drafts = fc
  .record({
    sword: fc.boolean(),
    pieces: fc.integer({ min: 1, max: 24 }),
    minutes: fc.array(fc.integer({ min: 0, max: 900 }), { minLength: 20, maxLength: 20 }),
    alpha: fc.integer({ min: 2, max: 120 }),
    beta: fc.integer({ min: 1, max: 40 }),
    euro: fc.boolean(),
    export: fc.boolean(),
    rush: fc.boolean(),
  })
  .map((shape): QuoteDraft => {
    const base = shape.sword ? swordFromFile() : palstaves();
    return {
      ...base,
      pieces: shape.pieces,
      lines: base.lines.map((line, i) =>
        line.minutes > 0 ? { ...line, minutes: shape.minutes[i] ?? line.minutes } : line,
      ),
      soundness: { ...base.soundness, alpha: shape.alpha, beta: shape.beta },
      currency: shape.euro ? palstaves().currency : swordFromFile().currency,
      tax: { ...base.tax, kind: shape.export ? 'export' : 'standard' },
      rush: shape.rush ? { heatMinor: 14_600, heats: 1 } : null,
    };
  });

describe('laws of every quote', () => {
  test('stage payments sum to the total, net, tax and gross, and none is negative', () => {
    fc.assert(
      fc.property(drafts, (draft) => {
        const { stages, totals, documentLines } = priceQuote(draft);
        expect(sum(stages.map(({ netMinor }) => netMinor))).toBe(totals.netMinor);
        expect(sum(stages.map(({ taxMinor }) => taxMinor))).toBe(totals.taxMinor);
        expect(sum(stages.map(({ grossMinor }) => grossMinor))).toBe(totals.grossMinor);
        expect(sum(documentLines.map(({ grossMinor }) => grossMinor))).toBe(totals.grossMinor);
        for (const stage of stages) expect(stage.netMinor).toBeGreaterThanOrEqual(0);
        for (const stage of stages) expect(stage.netMinor + stage.taxMinor).toBe(stage.grossMinor);
        for (const stage of stages) expect(Number.isSafeInteger(stage.grossMinor)).toBe(true);
      }),
    );
  });

  test('the first stage is never above half the work, up to a whole five', () => {
    fc.assert(
      fc.property(drafts, (draft) => {
        const { stages, documentLines } = priceQuote(draft);
        const half = ceilToStep((documentLines[0]?.netMinor ?? 0) / 2, 500);
        expect(stages[0]?.netMinor).toBeLessThanOrEqual(half + 500);
      }),
    );
  });

  test('what is committed before fettling is covered, or the shortfall is said', () => {
    fc.assert(
      fc.property(drafts, (draft) => {
        const { exposure } = priceQuote(draft);
        expect(exposure.receivedMinor + exposure.shortfallMinor).toBeGreaterThanOrEqual(exposure.committedMinor);
      }),
    );
  });

  test('percentiles rise, ranges nest, and the firm price earns its margin and breaks even in four of five', () => {
    fc.assert(
      fc.property(drafts, (draft) => {
        const { cost, prices, rangeMinor, chanceOfLoss, expectedMargin } = priceQuote(draft);
        expect(cost.p50).toBeLessThanOrEqual(cost.p80);
        expect(cost.p80).toBeLessThanOrEqual(cost.p95);
        expect(prices.p80Minor).toBeLessThanOrEqual(prices.p95Minor);
        expect(rangeMinor.low).toBeLessThanOrEqual(prices.firmMinor);
        expect(rangeMinor.high).toBeGreaterThanOrEqual(prices.firmMinor);
        expect(chanceOfLoss).toBeLessThanOrEqual(0.2 + 1e-9);
        expect(expectedMargin).toBeGreaterThanOrEqual(0.2 - 1e-9);
      }),
    );
  });

  test('the columns of the chart hold every chance once', () => {
    fc.assert(
      fc.property(drafts, (draft) => {
        const { bins } = priceQuote(draft);
        expect(sum(bins.map(({ probability }) => probability))).toBeCloseTo(1, 9);
        bins.slice(1).forEach((bin, i) => expect(bin.fromMinor).toBe(bins[i]?.toMinor));
        expect(bins.length).toBeLessThanOrEqual(14);
      }),
    );
  });

  test('one failed pour more in the history never makes anything cheaper, one sound pour more never dearer', () => {
    fc.assert(
      fc.property(drafts, (draft) => {
        const figures = (alpha: number, beta: number) =>
          priceQuote({ ...draft, soundness: { ...draft.soundness, alpha, beta } });
        const { alpha, beta } = draft.soundness;
        const [now, worse, better] = [figures(alpha, beta), figures(alpha, beta + 1), figures(alpha + 1, beta)];
        for (const key of ['expected', 'p50', 'p80', 'p95'] as const) {
          expect(worse.cost[key]).toBeGreaterThanOrEqual(now.cost[key] - 1e-6);
          expect(better.cost[key]).toBeLessThanOrEqual(now.cost[key] + 1e-6);
        }
        expect(worse.workMinor).toBeGreaterThanOrEqual(now.workMinor);
      }),
    );
  });

  test('more pieces cost more together and less each; more minutes never cost less', () => {
    fc.assert(
      fc.property(drafts, fc.nat(), (draft, pick) => {
        const more = priceQuote({ ...draft, pieces: draft.pieces + 1, rush: null });
        const now = priceQuote({ ...draft, rush: null });
        expect(more.cost.expected).toBeGreaterThan(now.cost.expected);
        expect(more.cost.expected / (draft.pieces + 1)).toBeLessThanOrEqual(now.cost.expected / draft.pieces + 100);
        const index = pick % draft.lines.length;
        const longer = draft.lines.map((line, i) => (i === index ? { ...line, minutes: line.minutes + 30 } : line));
        expect(priceQuote({ ...draft, lines: longer }).cost.expected).toBeGreaterThanOrEqual(
          priceQuote(draft).cost.expected,
        );
      }),
    );
  });

  test('rush never makes a piece cheaper', () => {
    fc.assert(
      fc.property(drafts, (draft) => {
        const calm = priceQuote({ ...draft, rush: null });
        const rushed = priceQuote({ ...draft, rush: { heatMinor: 14_600, heats: 1 } });
        expect(rushed.cost.expected).toBeGreaterThanOrEqual(calm.cost.expected);
      }),
    );
  });

  test('a cancellation gives back and keeps exactly what was paid', () => {
    const facts = fc.record({
      cancelledBy: fc.constantFrom('customer' as const, 'studio' as const),
      paidNetMinor: fc.integer({ min: 0, max: 1_000_000 }),
      costToDateMinor: fc.integer({ min: 0, max: 1_000_000 }),
      reusableMinor: fc.integer({ min: 0, max: 200_000 }),
    });
    fc.assert(
      fc.property(facts, (item) => {
        const { retained, refund } = cancellationStatement({ ...item, taxRate: 0.2 });
        expect(retained.grossMinor + refund.grossMinor).toBe(item.paidNetMinor + share(item.paidNetMinor, 0.2));
        expect(Math.min(retained.netMinor, retained.taxMinor, refund.netMinor, refund.taxMinor)).toBeGreaterThanOrEqual(
          0,
        );
      }),
    );
  });
});

describe('percentiles against a simulation', () => {
  /** A small linear congruential generator (constants of Numerical Recipes), so that the draw is the same every time. */
  function draws(seed: number) {
    let state = seed;
    return () => (state = (Math.imul(state, 1664525) + 1013904223) >>> 0) / 2 ** 32;
  }

  test('200,000 drawn commissions cost what the listed outcomes say', () => {
    const draft = swordFromFile();
    const priced = priceQuote(draft);
    const random = draws(7);
    const outcomes = listOutcomes(priced.sums, priced.failureChances, draft.hand, draft.pricing.handWeights);
    const gamma = (shape: number) => -Math.log(Array.from({ length: shape }, random).reduce((a, b) => a * b, 1));
    const costs = Array.from({ length: 200_000 }, () => {
      const [a, b] = [gamma(17), gamma(7)];
      const p = a / (a + b);
      let failures = 0;
      while (random() > p) failures += 1;
      const u = random();
      const hand = u < 0.3 ? 0.85 : u < 0.7 ? 1 : 1.3;
      return 53_390 + 25_522 + 3600 + 76_000 * hand + failures * (24_237 + 422 + 5320 * hand);
    }).sort((x, y) => x - y);
    expect(sum(costs) / costs.length / priced.cost.expected).toBeCloseTo(1, 2);
    for (const q of [0.5, 0.8, 0.95])
      expect(costs[Math.floor(q * costs.length)]).toBeCloseTo(costQuantile(outcomes, q), 6);
  });
});

describe('money', () => {
  test('halves go up, steps go out, and float dust is no step', () => {
    expect([halfUp(2.5), halfUp(-2.5), halfUp(4.5e-15), halfUp(1.005 * 100)]).toEqual([3, -2, 0, 101]);
    expect([ceilToStep(218_941, 500), ceilToStep(219_000, 500)]).toEqual([219_000, 219_000]);
    expect(floorToStep(219_500, 1_000)).toBe(219_000);
    expect(ceilToStep(2016 / 0.96, 10)).toBe(2100);
  });

  test('parts of a whole sum to it for any weights', () => {
    const weights = fc.array(fc.double({ min: 0, max: 1e6, noNaN: true }), { minLength: 1, maxLength: 30 });
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 1e9 }), weights, (amount, parts) => {
        const shares = allocate(amount, parts);
        expect(sum(shares)).toBe(amount);
        expect(Math.min(...shares)).toBeGreaterThanOrEqual(0);
      }),
    );
  });

  test('is written for its reader', () => {
    expect(formatMoney(219_000, 'GBP')).toBe('£2,190.00');
    expect(formatMoney(219_000, 'GBP', { pence: 'whole' })).toBe('£2,190');
    expect(formatMoney(187_399, 'EUR', { locale: 'de-DE' })).toBe('1.873,99\u00a0€');
    expect(formatMoney(-6072, 'GBP')).toBe('-£60.72');
  });

  // Cost 125 at a margin of 20 % sells at 156.25, a markup of 25 % (e-calculators.com/markup); 75 at 25 % at 100, a markup
  // of 33.3333 % (mathondemand.com).
  test('margin is a share of price', () => {
    expect(priceWithMargin(125, 0.2)).toBe(125 * 1.25);
    expect(priceWithMargin(75, 0.25)).toBe(100);
    expect(priceWithMargin(75, 0.25) / 75 - 1).toBeCloseTo(0.333333, 6);
  });
});
