import { describe, expect, test } from 'vitest';
import { card, estimated, forms } from './card';

/**
 * The demo studio's price list: one piece from the studio's own pattern, pounds, no carriage, no tax.
 * Columns: from, range to, deposit (and the payment at gate A where there is one).
 */
const PRICE_LIST: Record<string, [number, number, number[]]> = {
  'flat-axe': [320, 390, [125]],
  palstave: [360, 430, [135]],
  'socketed-axe': [395, 510, [200]],
  'socketed-gouge': [330, 430, [165]],
  'tanged-chisel': [255, 310, [115]],
  'leaf-shaped-sword': [1625, 2370, [410, 165]],
  spearhead: [435, 560, [220]],
  'socketed-sickle': [415, 540, [210]],
  'tanged-razor': [355, 540, [180]],
  'riveted-dagger': [670, 960, [170, 95]],
  'figure-hilt': [875, 1190, [220, 190]],
  'knopped-mace-head': [595, 790, [300]],
  'beast-head-handle': [475, 660, [240]],
  'serpent-linstock': [700, 1010, [175, 210]],
};

describe('the catalogue of forms', () => {
  test('has the fourteen forms of the price list', () => {
    expect(forms.map(({ slug }) => slug).sort()).toEqual(Object.keys(PRICE_LIST).sort());
  });

  test.each(Object.entries(PRICE_LIST))('%s costs what the price list says', (slug, [from, to, payments]) => {
    const priced = estimated({ form: slug });
    expect(priced.fromMinor / 100).toBe(from);
    expect(priced.rangeMinor.high / 100).toBe(to);
    expect(priced.stages.filter(({ id }) => id !== 'balance').map(({ netMinor }) => netMinor / 100)).toEqual(payments);
  });

  // The demo commissions of more than one piece or with a haft: [request, work, carriage, stages], pounds before tax.
  test.each([
    [{ form: 'flat-axe', haft: 'ash-haft' }, 410, 32, [125, 317]],
    [{ form: 'spearhead', pieces: 2 }, 765, 34, [195, 130, 474]],
    [{ form: 'beast-head-handle', pieces: 4 }, 1580, 26, undefined],
    [{ form: 'serpent-linstock', pieces: 3 }, 1870, 48, undefined],
    [{ form: 'riveted-dagger' }, 670, 59, undefined],
    [{ form: 'knopped-mace-head' }, 595, 32, [300, 327]],
    [{ form: 'socketed-axe' }, 395, 26, [200, 221]],
    [{ form: 'socketed-sickle' }, 415, 26, [210, 231]],
  ])('%j comes to the demo commission’s figures', (input, work, carriage, stages) => {
    const priced = estimated(input);
    expect([priced.fromMinor / 100, priced.carriage.minor / 100]).toEqual([work, carriage]);
    if (stages) expect(priced.stages.map(({ netMinor }) => netMinor / 100)).toEqual(stages);
    expect(priced.totals.netMinor / 100).toBe(work + carriage);
  });

  test.each(forms.map((form) => [form.slug, form] as const))(
    '%s names alloys, finish, edge and haft that exist',
    (_slug, form) => {
      const { rates } = card;
      expect(form.alloys).toContain(form.alloy);
      for (const code of form.alloys) expect(rates.alloys.map((alloy) => alloy.code)).toContain(code);
      expect(rates.finishes.map(({ code }) => code)).toContain(form.work.finish);
      expect(rates.edges.map(({ code }) => code)).toContain(form.work.edge);
      if (form.work.haft) expect(form.haft.map(({ code }) => code)).toContain(form.work.haft);
      expect(form.haft.length > 0).toBe(form.work.lines.some(({ role }) => role === 'haft'));
      expect(form.intendedEdges.length > 0).toBe(form.work.lines.some(({ role }) => role === 'edge'));
    },
  );
});
