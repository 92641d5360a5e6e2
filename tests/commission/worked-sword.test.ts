import { describe, expect, test } from 'vitest';
import { cancellationStatement } from '../../src/commission/pricing/cancellation';
import { costLine, unitCostMinor } from '../../src/commission/pricing/cost-lines';
import { sumLines } from '../../src/commission/pricing/cost-sums';
import { dateRange } from '../../src/commission/pricing/date-range';
import { committedMinor, costToFinish, expectedMargin, exposureMinor } from '../../src/commission/pricing/exposure';
import { priceQuote } from '../../src/commission/pricing/quote';
import { heatMinor } from '../../src/commission/pricing/rates';
import { afterPour, failureChance } from '../../src/commission/pricing/soundness';
import { swordFromFile } from '../../src/demo/drafts';
import { demoRates } from '../../src/demo/rates';

/** Source of the figures: the studio's worked example, one sword from the buyer's own file, reckoned twice by hand. */
const sword = swordFromFile();
const priced = priceQuote(sword);
const pounds = (minor: number) => Math.round(minor) / 100;

describe('one sword from a file', () => {
  test('a heat costs 146.00', () => expect(heatMinor(demoRates)).toBe(14_600));

  test('each cost line is half-up to the penny', () => {
    const costs = Object.fromEntries(sword.lines.map((line) => [line.id, unitCostMinor(line) / 100]));
    expect(costs).toMatchObject({
      ...{ intake: 69, file: 92, print: 34, pattern: 114, rubber: 167.4, 'gate-a': 23, record: 34.5 },
      ...{ wax: 50.5, shell: 111, burnout: 11, heat: 27.81, 'melt-loss': 0.6, gating: 3.46, 'break-out': 38 },
      ...{ metal: 12.85, abrasives: 36 },
    });
  });

  test('the sums of the lines', () => {
    expect(priced.sums).toMatchObject({
      beforeGate: 49_940,
      afterGate: 3450,
      attempt: 24_237,
      metal: 1285,
      downgrade: 422,
      sundries: 3600,
      hand: 76_000,
      lostHand: 5320,
      boughtMetal: 2396,
    });
  });

  test('soundness of the thin family: 17 sound against 7', () => {
    expect(sword.soundness).toMatchObject({ alpha: 17, beta: 7 });
    expect(failureChance(0, 1, sword.soundness)).toBeCloseTo(17 / 24, 12);
    expect(failureChance(1, 1, sword.soundness)).toBeCloseTo(119 / 600, 12);
    expect(failureChance(2, 1, sword.soundness)).toBeCloseTo(119 / 1950, 12);
    expect(priced.expectedFailures).toBeCloseTo(0.4375, 12);
  });

  test('expected cost and percentiles', () => {
    const { expected, p50, p80, p95 } = priced.cost;
    expect([expected, p50, p80, p95].map(pounds)).toEqual([1751.53, 1762.93, 1884.91, 2346.55]);
  });

  test('prices, range, chance of a loss, margin', () => {
    expect(priced.prices).toMatchObject({
      expectedMinor: 219_000,
      firmMinor: 219_000,
      p80Minor: 236_000,
      p95Minor: 293_500,
    });
    expect(priced.workMinor).toBe(219_000);
    expect(priced.rangeMinor).toEqual({ low: 219_000, high: 294_000 });
    expect(priced.chanceOfLoss * 100).toBeCloseTo(5.06, 2);
    expect(priced.expectedMargin * 100).toBeCloseTo(20.02, 2);
  });

  test('the document: 2,190 of work, 59 of carriage, tax, and stages that sum to it', () => {
    expect(priced.totals).toEqual({ netMinor: 224_900, taxMinor: 44_980, grossMinor: 269_880 });
    expect(priced.stages.map(({ netMinor }) => netMinor)).toEqual([55_000, 45_500, 124_400]);
    expect(priced.stages.map(({ grossMinor }) => grossMinor)).toEqual([66_000, 54_600, 149_280]);
    expect(priced.exposure).toEqual({ receivedMinor: 100_500, committedMinor: 100_121, shortfallMinor: 0 });
    expect(priced.warnings).toEqual([]);
  });

  test('the safer price covers four in five with the margin', () => {
    expect(priceQuote({ ...sword, price: { kind: 'p80' } }).workMinor).toBe(236_000);
  });
});

describe('the sword scrapped once at break-out', () => {
  const sums = sumLines(sword);
  const once = { poured: 1, scrapped: 1, sound: 0 };
  const belief = afterPour(sword.soundness, 'scrapped');
  const toFinish = costToFinish(sums, once, belief, sword.hand, sword.pricing.handWeights);

  test('745.99 spent, 1,271.01 to finish, 2,017.00 in all, a margin of 7.90 %', () => {
    expect(belief).toMatchObject({ alpha: 17, beta: 8 });
    expect(committedMinor(sums, once)).toBe(74_599);
    expect(pounds(toFinish)).toBe(1271.01);
    expect(pounds(committedMinor(sums, once) + toFinish)).toBe(2017);
    expect(expectedMargin(219_000, committedMinor(sums, once), toFinish) * 100).toBeCloseTo(7.9, 2);
  });

  test('exposure stays above zero, with 3.79 left after a sound second pour', () => {
    expect(exposureMinor(100_500, committedMinor(sums, once))).toBe(25_901);
    const twice = { poured: 2, scrapped: 1, sound: 1 };
    expect(exposureMinor(100_500, committedMinor(sums, twice))).toBe(379);
  });
});

describe('variants of the sword', () => {
  test('rush costs its heats and overtime: 2,318.52, a price of 2,900', () => {
    const rushed = priceQuote({ ...sword, rush: { heatMinor: heatMinor(demoRates), heats: 1 } });
    expect(pounds(rushed.cost.expected)).toBe(2318.52);
    expect(rushed.workMinor).toBe(290_000);
    expect(rushed.workMinor - priced.workMinor).toBe(71_000);
  });

  test('cancelled after gate A: 60.72 back, 599.28 kept', () => {
    const facts = { paidNetMinor: 55_000, taxRate: 0.2, costToDateMinor: 49_940 + 2396, reusableMinor: 2396 };
    const statement = cancellationStatement({ ...facts, cancelledBy: 'customer' });
    expect(statement.refund).toEqual({ netMinor: 5060, taxMinor: 1012, grossMinor: 6072 });
    expect(statement.retained).toEqual({ netMinor: 49_940, taxMinor: 9988, grossMinor: 59_928 });
    const byStudio = cancellationStatement({ ...facts, cancelledBy: 'studio' });
    expect(byStudio.retained.grossMinor).toBe(0);
    expect(byStudio.refund.grossMinor).toBe(66_000);
  });

  test('20 hours of hand work behind a queue of 148: 8 to 12 weeks', () => {
    expect(dateRange(demoRates.throughput, 20, priced.chanceOfRepour)).toEqual({ earliestWeeks: 8, latestWeeks: 12 });
    expect(dateRange(demoRates.throughput, 20, 0.1)).toEqual({ earliestWeeks: 8, latestWeeks: 9 });
  });

  test('removing one failed pour from the history lowers the price', () => {
    const luckier = priceQuote({ ...sword, soundness: { ...sword.soundness, beta: 6 } });
    expect(luckier.cost.expected).toBeLessThan(priced.cost.expected);
    expect(luckier.workMinor).toBeLessThan(priced.workMinor);
  });

  test('a price of the owner’s own below cost, a free line and a range missed are all warned of', () => {
    const line = costLine({ id: 'gift', label: 'Scabbard advice', group: 'before-gate' });
    const draft = {
      ...sword,
      lines: [...sword.lines, line],
      price: { kind: 'own', workMinor: 170_000, reason: 'A friend of the house' } as const,
      shownRange: { lowMinor: 219_000, highMinor: 294_000 },
    };
    const codes = priceQuote(draft).warnings.map(({ code, blocking }) => [code, blocking]);
    expect(codes).toEqual([['zero-line', true], ['outside-range', true], ['below-cost', false]]); // prettier-ignore
    const answered = {
      ...draft,
      outOfRangeReason: 'Price agreed at the fair.',
      lines: [...sword.lines, { ...line, zeroReason: 'On the house' }],
    };
    expect(priceQuote(answered).warnings.some(({ blocking }) => blocking)).toBe(false);
  });
});
