import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { canonicalJson } from '../../src/commission/canonical-json';
import { diffQuotes } from '../../src/commission/pricing/quote-diff';
import { quoteDraftSchema } from '../../src/commission/pricing/quote-draft';
import { palstaves, swordFromFile } from '../../src/demo/drafts';

const sword = swordFromFile();

describe('the text that is hashed', () => {
  // RFC 8785 (JSON canonicalization) section 3.2.3: keys sorted by UTF-16 code units, arrays untouched.
  test('sorts keys by code unit and keeps arrays', () => {
    const value = { '€': 1, '\r': 2, '1': 3, a: { z: [3, 1, 2], b: null }, '\u0080': 4, ö: 5 };
    expect(canonicalJson(value)).toBe('{"\\r":2,"1":3,"a":{"b":null,"z":[3,1,2]},"\u0080":4,"ö":5,"€":1}');
  });

  test('does not depend on the order in which keys were written, and reads back as the same value', () => {
    fc.assert(
      fc.property(fc.dictionary(fc.string(), fc.jsonValue()), (value) => {
        const turned = Object.fromEntries(Object.entries(value).reverse());
        expect(canonicalJson(turned)).toBe(canonicalJson(value));
        expect(JSON.parse(canonicalJson(value))).toEqual(JSON.parse(JSON.stringify(value)));
      }),
    );
  });

  test('leaves undefined out and refuses what JSON cannot hold', () => {
    expect(canonicalJson({ a: undefined, b: [undefined] })).toBe('{"b":[null]}');
    expect(() => canonicalJson({ a: NaN })).toThrow(TypeError);
  });

  test('of a draft is the same after a trip through JSON and the schema', () => {
    for (const draft of [sword, palstaves()]) {
      expect(canonicalJson(quoteDraftSchema.parse(JSON.parse(JSON.stringify(draft))))).toBe(canonicalJson(draft));
    }
  });
});

describe('what changed between two quotes', () => {
  test('nothing, when nothing did', () => expect(diffQuotes(sword, swordFromFile())).toEqual([]));

  test('buyer’s facts may be mailed, cost lines may not', () => {
    const lines = sword.lines.map((line) => (line.id === 'fettle' ? { ...line, minutes: 516 } : line));
    const next = { ...sword, lines: lines.filter(({ id }) => id !== 'print'), validityDays: 14, mark: 'On the pommel' };
    const changes = diffQuotes(sword, next);
    expect(
      changes.filter(({ forBuyer }) => forBuyer).map(({ field, before, after }) => [field, before, after]),
    ).toEqual([
      ['validity', '30 days', '14 days'],
      ['mark', sword.mark, 'On the pommel'],
    ]);
    expect(changes.filter(({ forBuyer }) => !forBuyer)).toEqual([
      expect.objectContaining({
        field: 'line:fettle',
        before: expect.stringContaining('420 min, 266.00'),
        after: expect.stringContaining('516 min, 326.80'),
      }),
      expect.objectContaining({
        field: 'line:print',
        before: expect.stringContaining('34.00'),
        after: 'not in the quote',
      }),
    ]);
  });

  test('is empty both ways exactly when the quotes read the same', () => {
    expect(diffQuotes(sword, palstaves()).length).toBe(diffQuotes(palstaves(), sword).length);
  });
});

describe('a draft from the desk', () => {
  test('explains what is missing or out of reason', () => {
    const broken = {
      ...sword,
      title: ' ',
      pieces: 0,
      price: { kind: 'own', workMinor: 0, reason: '' },
      dateRange: { earliestWeeks: 9, latestWeeks: 3 },
    };
    const result = quoteDraftSchema.safeParse(broken);
    const paths = result.error?.issues.map(({ path }) => path.join('.'));
    expect(paths).toEqual(expect.arrayContaining(['title', 'pieces', 'price.workMinor', 'price.reason', 'dateRange']));
    for (const { message } of result.error?.issues ?? []) expect(message).toMatch(/^[A-Z].*[.;]/);
  });
});
