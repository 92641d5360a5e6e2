import { describe, expect, it } from 'vitest';
import {
  alloyById,
  alloys,
  alloySchema,
  alloySources,
  freezingGroup,
  freezingRangeC,
  refusedMetals,
  type Alloy,
} from '../../src/casting/alloys';
import { compositionWords, studioAlloys } from '../../src/casting/studio-alloys';
import { sourcesOf, withReferences } from '../../src/components/metals/value-words';

/**
 * Densities of the elements in g/cm3 near 20 C: CRC Handbook of Chemistry and Physics, section 4 (from memory; copper,
 * tin, zinc and lead as every data sheet prints them).
 */
const element: Record<string, number> = {
  Cu: 8.96,
  Sn: 7.287,
  Zn: 7.134,
  Pb: 11.34,
  Al: 2.7,
  Si: 2.329,
  Mn: 7.43,
  Fe: 7.87,
  Ni: 8.9,
  Ag: 10.49,
};

/** Rule of mixtures: 1 / rho = sum of w / rho of the parts. */
function mixtureDensity(parts: Record<string, number>): number {
  const total = Object.values(parts).reduce((sum, share) => sum + share, 0);
  const volume = Object.entries(parts).reduce((sum, [symbol, share]) => sum + share / total / element[symbol]!, 0);
  return 1 / volume;
}

const each = alloys.map((alloy): [string, Alloy] => [alloy.id, alloy]);

describe.each(each)('%s', (_, alloy) => {
  it('is a complete record', () => {
    expect(alloySchema.parse(alloy)).toEqual(alloy);
  });

  it('has a nominal composition that sums to about 100 % (99 to 101: sheets round each part)', () => {
    const sum = Object.values(alloy.compositionPct.value).reduce((a, b) => a + b, 0);
    expect(sum).toBeGreaterThanOrEqual(99);
    expect(sum).toBeLessThanOrEqual(101);
  });

  it('lies inside its own limits', () => {
    for (const [symbol, share] of Object.entries(alloy.compositionPct.value)) {
      const limit = alloy.limitsPct.value[symbol];
      if (limit?.min !== undefined) expect(share, symbol).toBeGreaterThanOrEqual(limit.min);
      if (limit?.max !== undefined) expect(share, symbol).toBeLessThanOrEqual(limit.max);
    }
  });

  it('melts over a range that begins below its end, and is poured above its liquidus', () => {
    expect(alloy.solidusC.value).toBeLessThan(alloy.liquidusC.value);
    const hottest = Math.max(...Object.values(alloy.pourC.value).map((band) => band.high));
    expect(hottest).toBeGreaterThan(alloy.liquidusC.value + 50);
    for (const band of Object.values(alloy.pourC.value)) expect(band.low).toBeLessThan(band.high);
  });

  // Alloys whose atoms pack closer than the rule assumes (aluminium, silicon, much zinc or tin) come out denser than it.
  it('has a density near the rule of mixtures: within 1.2 %, or up to 7 % above it where phases contract', () => {
    const { Al = 0, Si = 0, Zn = 0, Sn = 0 } = alloy.compositionPct.value;
    const contracts = Al > 0.2 || Si > 0.5 || Zn > 30 || Sn > 20;
    const excess = alloy.densityGPerCm3.value / mixtureDensity(alloy.compositionPct.value) - 1;
    expect(excess).toBeGreaterThan(-0.012);
    expect(excess).toBeLessThan(contracts ? 0.07 : 0.012);
  });

  it('names a known source for every value', () => {
    const sources = JSON.stringify(alloy).matchAll(/"source":"(\w+)"/g);
    for (const [, key] of sources) expect(Object.keys(alloySources)).toContain(key);
    const tokens = JSON.stringify(alloy).matchAll(/\{(\w+)\}/g);
    for (const [, key] of tokens) expect(Object.keys(alloySources)).toContain(key);
  });

  it('says so when it holds lead, and then is never for food', () => {
    const lead = (alloy.compositionPct.value.Pb ?? 0) >= 0.5;
    expect(alloy.lead).toBe(lead);
    if (lead) {
      expect(alloy.hazards).toContain('lead');
      expect(alloy.suits.foodContact).toMatch(/^never/);
    }
  });
});

describe('the rule of mixtures itself, against worked figures of the trade notes', () => {
  it('gives 8.759 for 90/10 tin bronze and 7.388 for 88-3-9 aluminium bronze', () => {
    expect(mixtureDensity({ Cu: 90, Sn: 10 })).toBeCloseTo(8.759, 2);
    expect(mixtureDensity({ Cu: 88, Fe: 3, Al: 9 })).toBeCloseTo(7.388, 2);
  });

  it('is within 0.3 % for 90/10 and 85-5-5-5, and 3.3 % low for 88-3-9', () => {
    const error = (id: string) => {
      const alloy = alloyById(id)!;
      return mixtureDensity(alloy.compositionPct.value) / alloy.densityGPerCm3.value - 1;
    };
    expect(Math.abs(error('tin-bronze-90-10'))).toBeLessThan(0.003);
    expect(Math.abs(error('leaded-red-brass-c83600'))).toBeLessThan(0.003);
    expect(error('aluminium-bronze-c95200')).toBeCloseTo(-0.033, 3);
  });
});

describe('values as their sheets print them', () => {
  // Trade association sheets as republished by a foundry: C90300, C90900, C85700, C87500 (looked up again page by page).
  it.each([
    ['tin-bronze-c90300', 1570, 1832, 0.318],
    ['tin-bronze-c90900', 1505, 1792, null],
    ['yellow-brass-c85700', 1675, 1725, 0.304],
    ['silicon-brass-c87500', 1510, 1683, 0.299],
  ] as const)('%s: solidus %i F, liquidus %i F', (id, solidusF, liquidusF, lbPerIn3) => {
    const alloy = alloyById(id)!;
    const celsius = (fahrenheit: number) => ((fahrenheit - 32) * 5) / 9;
    expect(Math.abs(alloy.solidusC.value - celsius(solidusF))).toBeLessThan(1);
    expect(Math.abs(alloy.liquidusC.value - celsius(liquidusF))).toBeLessThan(1);
    // 1 lb/in3 is 27.6799 g/cm3 (453.59237 g over 16.387064 cm3, both exact by definition).
    if (lbPerIn3) expect(alloy.densityGPerCm3.value).toBeCloseTo((lbPerIn3 * 453.59237) / 16.387064, 1);
  });

  it('pattern shrinkage in inches per foot agrees with the per cent: 5/32 is 1.302, 15/64 is 1.953, 3/16 is 1.5625', () => {
    expect(alloyById('tin-bronze-90-10')!.shrinkagePct!.value.low).toBeCloseTo((5 / 32 / 12) * 100, 3);
    expect(alloyById('silicon-brass-c87500')!.shrinkagePct!.value.low).toBeCloseTo((15 / 64 / 12) * 100, 3);
    expect(alloyById('yellow-brass-c85200')!.shrinkagePct!.value.low).toBeCloseTo((3 / 16 / 12) * 100, 4);
  });

  it('keeps the disagreements between sheets where a reader sees them', () => {
    expect(alloyById('aluminium-bronze-c95200')!.densityGPerCm3.notes?.join(' ')).toContain('8.3');
    expect(alloyById('silicon-bronze-c87300')!.solidusC.notes?.join(' ')).toContain('866');
    expect(alloyById('yellow-brass-c85800')!.densityGPerCm3.notes?.join(' ')).toContain('8.0');
  });
});

describe('freezing', () => {
  it('is grouped by its width: under 50 C short, to 110 intermediate, above long (limits from memory)', () => {
    expect(freezingGroup(alloyById('aluminium-bronze-c95200')!)).toBe('short');
    expect(freezingGroup(alloyById('silicon-brass-c87500')!)).toBe('intermediate');
    expect(freezingGroup(alloyById('tin-bronze-90-10')!)).toBe('long');
    expect(freezingRangeC(alloyById('tin-bronze-c90700')!)).toBe(168);
  });
});

describe('memory, refusals and sources', () => {
  it('marks what nobody found in print', () => {
    expect(alloyById('tin-bronze-c90900')!.densityGPerCm3?.source).toBe('memory');
    expect(alloyById('tin-bronze-c90700')!.densityGPerCm3?.source).not.toBe('memory');
  });

  it('refuses arsenical bronze, beryllium copper and scrap of unknown make-up, each with a reason', () => {
    expect(refusedMetals.map((metal) => metal.id)).toEqual([
      'arsenical-bronze',
      'beryllium-copper-c82500',
      'unknown-scrap',
    ]);
    for (const metal of refusedMetals) expect(metal.reason.length).toBeGreaterThan(20);
    const refusedIds = new Set(refusedMetals.map((metal) => metal.id));
    expect(alloys.filter((alloy) => refusedIds.has(alloy.id))).toEqual([]);
  });

  it('lists for a page exactly the publications it refers to', () => {
    const order = Object.keys(alloySources).filter((key) => !['memory', 'practice', 'calc_here'].includes(key));
    expect(sourcesOf(alloyById('tin-bronze-90-10')!, order)).toEqual([
      'c524',
      'mif524',
      'bs1400',
      'dooley',
      'calc',
      'key',
      'edqm',
    ]);
  });

  it('splits a text at its references', () => {
    expect(withReferences('gassing high {conex872}; pour clean')).toEqual([
      { words: 'gassing high' },
      { key: 'conex872' },
      { words: '; pour clean' },
    ]);
  });
});

describe('the studio’s own alloys', () => {
  it('are TB90, TB88 and RB85, and sum to 100 %', () => {
    expect(studioAlloys.map((alloy) => alloy.code)).toEqual(['TB90', 'TB88', 'RB85']);
    for (const { compositionPct } of studioAlloys)
      expect(Object.values(compositionPct).reduce((a, b) => a + b, 0)).toBe(100);
  });

  it('stand where they say: TB90 is in the table, TB88 lies between two of it, RB85 has none', () => {
    const tin = (id: string) => alloyById(id)!.compositionPct.value.Sn!;
    const [tb90, tb88, rb85] = studioAlloys;
    expect(tb90!.near.map(tin)).toEqual([tb90!.compositionPct.Sn]);
    const [lower, upper] = tb88!.near.map(tin);
    expect(lower!).toBeLessThan(tb88!.compositionPct.Sn!);
    expect(upper!).toBeGreaterThan(tb88!.compositionPct.Sn!);
    expect(rb85!.near).toEqual([]);
    expect(alloys.some((alloy) => !alloy.lead && alloy.compositionPct.value.Zn === 15)).toBe(false);
  });

  it('are told in words', () => {
    expect(compositionWords({ Cu: 90, Sn: 10 })).toBe('Copper 90 %, tin 10 %');
    expect(compositionWords({ Cu: [95, 99], As: [1, 5] })).toBe('Copper 95–99 %, arsenic 1–5 %');
  });
});
