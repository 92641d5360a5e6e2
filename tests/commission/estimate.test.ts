import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { draftFromEstimate, estimate } from '../../src/commission/pricing/estimate';
import { type EstimateRequestInput, estimateRequestSchema } from '../../src/commission/pricing/estimate-request';
import { chanceWords } from '../../src/commission/pricing/estimate-words';
import { priceQuote } from '../../src/commission/pricing/quote';
import { quoteDraftSchema } from '../../src/commission/pricing/quote-draft';
import { swordFromFile } from '../../src/demo/drafts';
import { card, estimated, forms, request } from './card';

const sum = (values: readonly number[]) => values.reduce((a, b) => a + b, 0);
const ownSword = {
  what: 'own',
  massG: 720,
  longestMm: 620,
  thinnestMm: 2,
  alloy: 'TB88',
  bladed: true,
  edge: 'hammered',
} as const;

/** Anything the page can ask for that the studio offers. */
const requests = fc
  .record({
    form: fc.constantFrom(...forms),
    own: fc.boolean(),
    pieces: fc.integer({ min: 1, max: 24 }),
    scale: fc.double({ min: 0.7, max: 1.3, noNaN: true }),
    pick: fc.nat(1000),
    finish: fc.constantFrom(undefined, ...card.rates.finishes.map(({ code }) => code)),
    hours: fc.option(fc.integer({ min: 0, max: 60 }), { nil: undefined }),
    rush: fc.boolean(),
    destination: fc.constantFrom('GB', 'NL', 'US'),
    currency: fc.constantFrom('GBP' as const, 'EUR' as const, 'USD' as const),
    buyer: fc.constantFrom('consumer' as const, 'institution' as const),
    texture: fc.constantFrom('plain' as const, 'worked' as const, 'ornate' as const),
  })
  .map(({ form, own, scale, pick, hours, ...rest }): Partial<EstimateRequestInput> => {
    const common = { ...rest, finishHours: hours };
    if (own)
      return {
        ...common,
        what: 'own',
        massG: 50 + pick,
        longestMm: 60 + pick / 2,
        thinnestMm: 2 + (pick % 9),
        cored: pick % 2 === 0,
      };
    const [alloy, haft] = [
      form.alloys[pick % form.alloys.length],
      form.haft[pick % Math.max(1, form.haft.length)]?.code,
    ];
    return { ...common, what: 'form', form: form.slug, alloy, haft, lengthMm: form.dimensionsMm.length * scale };
  });

describe('every estimate', () => {
  test('has lines that sum to its price, stages that sum to its total, and a range around it', () => {
    fc.assert(
      fc.property(requests, (input) => {
        const priced = estimated(input);
        expect(sum(priced.lines.map(({ amountMinor }) => amountMinor))).toBe(priced.fromMinor);
        expect(sum(priced.stages.map(({ grossMinor }) => grossMinor))).toBe(priced.totals.grossMinor);
        expect(priced.fromMinor + priced.carriage.minor).toBe(priced.totals.netMinor);
        expect(priced.rangeMinor.low).toBeLessThanOrEqual(priced.fromMinor);
        expect(priced.rangeMinor.high).toBeGreaterThanOrEqual(priced.fromMinor);
        expect(priced.weeks.earliestWeeks).toBeLessThanOrEqual(priced.weeks.latestWeeks);
        expect(priced.assumptions.length).toBeGreaterThan(3);
      }),
    );
  });

  test('says nothing of margin or of the chance of a loss', () => {
    const words = JSON.stringify(estimated({ form: 'leaf-shaped-sword' })).toLowerCase();
    expect(words).not.toMatch(/margin|loss|profit/);
  });

  test('has levers that are cheaper by exactly what they say', () => {
    fc.assert(
      fc.property(requests, (input) => {
        const now = estimated(input);
        for (const lever of now.levers) {
          const then = estimated({ ...input, ...lever.change });
          const [before, after] = lever.id.startsWith('pieces-')
            ? [now.fromMinor / now.pieces, then.fromMinor / then.pieces]
            : [now.fromMinor, then.fromMinor];
          expect(Math.abs(after - before - lever.differenceMinor)).toBeLessThanOrEqual(0.5);
          expect(lever.differenceMinor).toBeLessThan(0);
        }
      }),
      { numRuns: 30 },
    );
  });

  test('is the same for text from a plain form and for numbers from the page', () => {
    const typed = {
      form: 'palstave',
      pieces: '6',
      lengthMm: '160,5',
      rush: '',
      haft: 'elbow-haft',
      finishHours: ' ',
      destination: 'nl',
    };
    const numbers = {
      form: 'palstave',
      pieces: 6,
      lengthMm: 160.5,
      rush: false,
      haft: 'elbow-haft',
      destination: 'NL',
    };
    expect(estimated(typed)).toEqual(estimated(numbers));
  });

  test('survives its way through JSON', () => {
    const priced = estimated({ form: 'spearhead', pieces: 3, currency: 'EUR', destination: 'DE' });
    expect(JSON.parse(JSON.stringify(priced))).toEqual(priced);
  });

  test('is the quote the owner’s desk starts from, to the penny', () => {
    fc.assert(
      fc.property(requests, (input) => {
        const draft = draftFromEstimate(request(input), card);
        if (!draft.ok) throw new Error(draft.problem.message);
        expect(quoteDraftSchema.safeParse(draft.value).success).toBe(true);
        const priced = priceQuote(draft.value);
        expect(priced.totals).toEqual(estimated(input).totals);
        expect(priced.warnings.filter(({ blocking }) => blocking)).toEqual([]);
      }),
    );
  });
});

describe('what moves the price', () => {
  const sword = estimated({ form: 'leaf-shaped-sword' });

  test('a larger size costs more, weighs more and needs a new pattern', () => {
    const longer = estimated({ form: 'leaf-shaped-sword', lengthMm: 680 });
    expect(longer.fromMinor).toBeGreaterThan(sword.fromMinor);
    expect(longer.massesG.finished).toBe(Math.round((720 * 680) / 620));
    expect(longer.assumptions.join(' ')).toContain('a new pattern');
    expect(longer.levers.map(({ id }) => id)).toContain('own-size');
    expect(estimated({ form: 'leaf-shaped-sword', lengthMm: 621 }).massesG).toEqual(sword.massesG);
  });

  test('a finish of none leaves the finishing out and says so', () => {
    const rough = estimated({ form: 'leaf-shaped-sword', finishHours: 0 });
    expect(rough.fromMinor).toBeLessThan(sword.fromMinor);
    expect(rough.lines.map(({ id }) => id)).not.toContain('finish');
    expect(rough.assumptions.join(' ')).toContain('as you set them');
  });

  test('the dagger comes with its hilt unless it is asked for without', () => {
    const bare = estimated({ form: 'riveted-dagger', haft: 'none' });
    expect(bare.fromMinor).toBeLessThan(estimated({ form: 'riveted-dagger' }).fromMinor);
  });

  test('a blade pays for an adult’s signature, a tool does not; abroad there is no tax', () => {
    expect(sword.carriage.words).toContain('adult must sign');
    expect(estimated({ form: 'flat-axe' }).carriage.words).not.toContain('adult');
    expect(estimated({ form: 'flat-axe', destination: 'FR' }).totals.taxMinor).toBe(0);
    expect(sword.pricesShown).toBe('inclusive');
    expect(estimated({ form: 'flat-axe', buyer: 'institution' }).pricesShown).toBe('exclusive');
  });

  test('rush leaves the queue and costs more', () => {
    const rushed = estimated({ form: 'leaf-shaped-sword', rush: 'on' });
    expect(rushed.weeks.latestWeeks).toBeLessThan(sword.weeks.latestWeeks);
    expect(rushed.fromMinor).toBeGreaterThan(sword.fromMinor);
  });

  test('a sword described only by mass and size comes within a quarter of the drafted quote for one from a file', () => {
    const drafted = priceQuote(swordFromFile()).workMinor;
    expect(Math.abs(estimated(ownSword).fromMinor / drafted - 1)).toBeLessThan(0.25);
  });

  test('a core, ornament, thin sections each choose their family', () => {
    const family = (input: object) => estimated({ ...ownSword, ...input }).assumptions.join(' ');
    expect(family({})).toContain('Thin blades');
    expect(family({ cored: true })).toContain('Cored pieces');
    expect(family({ texture: 'ornate' })).toContain('Figures and ornament');
    expect(family({ thinnestMm: 9, longestMm: 150 })).toContain('Compact solids');
  });

  test('a measured volume stands in for the mass', () => {
    const volumeMm3 = (720 / 8.7) * 1000;
    const [measured, weighed] = [estimated({ ...ownSword, massG: '', volumeMm3 }), estimated(ownSword)];
    expect(measured.massesG).toEqual(weighed.massesG);
    expect(measured.lines).toEqual(weighed.lines);
  });

  test('chances are said the way people say them', () => {
    expect([0.29, 0.04, 0.001, 0.99].map(chanceWords)).toEqual([
      'about 3 times in 10',
      'about once in 25',
      'hardly ever',
      'nearly every time',
    ]);
  });
});

describe('what is refused', () => {
  const refusal = (input: Partial<EstimateRequestInput>) => {
    const result = estimate(request(input), card);
    if (result.ok) throw new Error('It was estimated, although it should not have been.');
    return result.problem;
  };

  test('unknown forms, alloys, hafts, finishes and edges name their field', () => {
    expect(Object.keys(refusal({ form: 'halberd' }).fields ?? {})).toEqual(['form']);
    expect(refusal({ form: 'socketed-axe', alloy: 'RB85' }).fields?.alloy).toContain('TB90, TB88');
    expect(Object.keys(refusal({ form: 'socketed-axe', haft: 'grip-plates' }).fields ?? {})).toEqual(['haft']);
    expect(Object.keys(refusal({ form: 'palstave', finish: 'gilt' }).fields ?? {})).toEqual(['finish']);
    expect(Object.keys(refusal({ form: 'palstave', edge: 'serrated' }).fields ?? {})).toEqual(['edge']);
  });

  test('a piece beyond the largest crucible says how much we can pour', () => {
    expect(refusal({ ...ownSword, massG: 7000 }).fields?.massG).toContain('9,500 g');
  });

  test('numbers out of reason are explained field by field', () => {
    const result = estimateRequestSchema.safeParse({
      what: 'own',
      massG: 'heavy',
      longestMm: '5',
      pieces: '2.5',
      destination: 'England',
    });
    expect(result.success).toBe(false);
    const messages = Object.fromEntries(
      result.error?.issues.map(({ path, message }) => [path.join('.'), message]) ?? [],
    );
    expect(messages).toMatchObject({
      massG: expect.stringContaining('5 to 8,000 g'),
      longestMm: expect.stringContaining('10 to 1000 mm'),
      pieces: expect.stringContaining('whole number from 1 to 24'),
      destination: expect.stringContaining('country'),
    });
  });

  test('a piece of your own needs a mass or a volume, a length and a thinnest section', () => {
    const result = estimateRequestSchema.safeParse({ what: 'own' });
    expect(result.error?.issues.map(({ path }) => path.join('.'))).toEqual(['massG', 'longestMm', 'thinnestMm']);
    expect(estimateRequestSchema.safeParse({}).error?.issues[0]?.path).toEqual(['form']);
  });
});
