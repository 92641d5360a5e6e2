// The specification, 4.7 (one scrap: 745.99 spent, 1,271.01 to finish, 7.90 %, + 259.01; after a sound second pour + 3.79) and
// 4.10 (six palstaves, seven poured: c2 605.49; rate 1.1934).
import { describe, expect, test } from 'vitest';
import { marginNow, type PourSoFar } from '../../src/commission/pricing/margin-now';
import { priceQuote } from '../../src/commission/pricing/quote';
import { palstaves, swordFromFile } from '../../src/demo/drafts';

const quoted = (draft: ReturnType<typeof swordFromFile>) => ({ draft, priced: priceQuote(draft) });
const pour = (result: PourSoFar['result'], late = false): PourSoFar => ({ poured: true, result, late });
const SWORD_PAID = [
  { netMinor: 55_000, grossMinor: 66_000, paidMinor: 66_000 },
  { netMinor: 45_500, grossMinor: 54_600, paidMinor: 54_600 },
  { netMinor: 124_400, grossMinor: 149_280, paidMinor: 0 },
];

describe('the margin now expected', () => {
  const sword = quoted(swordFromFile());

  test('is the quoted one before anything is poured', () => {
    const margin = marginNow(sword, [], SWORD_PAID);
    expect(margin.now).toBeCloseTo(margin.quoted, 12);
    expect((margin.quoted * 100).toFixed(2)).toBe('20.02');
  });

  test('falls to 7.90 % with the scrapped sword, and exposure to 259.01', () => {
    const margin = marginNow(sword, [pour('scrapped')], SWORD_PAID);
    expect((margin.now * 100).toFixed(2)).toBe('7.90');
    expect(Math.round(margin.toFinishMinor)).toBe(127_101);
    expect(margin).toMatchObject({ committedMinor: 74_599, receivedNetMinor: 100_500, exposureMinor: 25_901 });
  });

  test('leaves 3.79 after a sound second pour, and the margin rises again', () => {
    const once = marginNow(sword, [pour('scrapped')], SWORD_PAID);
    const twice = marginNow(sword, [pour('scrapped'), pour('sound')], SWORD_PAID);
    expect(twice.exposureMinor).toBe(379);
    expect(twice.now).toBeGreaterThan(once.now);
  });

  test('counts a mould that waits for its metal as nothing yet', () => {
    const waiting = marginNow(sword, [{ poured: false, result: null, late: false }], SWORD_PAID);
    expect(waiting.committedMinor).toBe(sword.priced.sums.beforeGate);
  });

  test('loses half the fettling, 133.00, to a fault that opens late', () => {
    const [early, late] = [false, true].map((isLate) => marginNow(sword, [pour('scrapped', isLate)], SWORD_PAID));
    // The specification, 4.7: half of seven hours at 38.00.
    expect(late!.committedMinor - early!.committedMinor).toBe(13_300);
    expect(late!.now).toBeLessThan(early!.now);
  });

  test('of a quote in euros is reckoned in pounds', () => {
    const pours = [...Array.from({ length: 6 }, () => pour('sound')), pour('scrapped')];
    const paid = [
      { netMinor: 63_500, grossMinor: 63_500, paidMinor: 63_500 },
      { netMinor: 10_000, grossMinor: 10_000, paidMinor: 10_000 },
    ];
    const margin = marginNow(quoted(palstaves()), pours, paid);
    expect(margin).toMatchObject({ currency: 'GBP', committedMinor: 60_549, receivedNetMinor: 61_589 });
  });
});
