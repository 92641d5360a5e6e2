import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { lengthWords, massWords } from '../../src/casting/reader-units';
import { studioAlloy } from '../../src/casting/studio-alloys';
import { formSchema } from '../../src/commission/pricing/form';
import { byPeriod, periodOf } from '../../src/components/catalogue/periods';

const folder = new URL('../../src/content/forms/', import.meta.url);
const files = readdirSync(folder).map((name) => ({ name, text: readFileSync(new URL(name, folder), 'utf8') }));
const forms = files.map(({ text }) => formSchema.parse(JSON.parse(text)));
const bySlug = new Map(forms.map((form) => [form.slug, form]));

/** The studio's table of forms: length and width in mm, finished, cast and poured mass in g, alloy, family. */
const table: [string, string, number, number | null, number, number, number, string, string][] = [
  ['flat-axe', 'Early Bronze Age', 142, 62, 310, 340, 540, 'TB90', 'compact'],
  ['palstave', 'Middle Bronze Age', 152, 60, 460, 500, 800, 'TB90', 'compact'],
  ['socketed-axe', 'Late Bronze Age', 98, 46, 185, 215, 380, 'TB90', 'cored'],
  ['socketed-gouge', 'Late Bronze Age', 85, 19, 82, 100, 190, 'TB90', 'cored'],
  ['tanged-chisel', 'Middle–Late Bronze Age', 128, 22, 96, 115, 190, 'TB90', 'compact'],
  ['leaf-shaped-sword', 'Late Bronze Age', 620, 46, 720, 880, 1600, 'TB88', 'thin'],
  ['spearhead', 'Middle Bronze Age', 168, 36, 112, 135, 250, 'TB88', 'cored'],
  ['socketed-sickle', 'Late Bronze Age', 172, null, 128, 155, 290, 'TB90', 'cored'],
  ['tanged-razor', 'Late Bronze Age', 118, 40, 46, 60, 120, 'TB90', 'thin'],
  ['riveted-dagger', 'Early Bronze Age', 248, 58, 205, 250, 460, 'TB88', 'thin'],
  ['figure-hilt', 'Iron Age', 135, 62, 390, 430, 760, 'TB90', 'ornate'],
  ['knopped-mace-head', '12th–13th c.', 78, 74, 620, 670, 1080, 'TB90', 'cored'],
  ['beast-head-handle', '13th–14th c.', 105, 18, 95, 108, 200, 'RB85', 'ornate'],
  ['serpent-linstock', '16th–17th c.', 210, 150, 540, 600, 980, 'RB85', 'ornate'],
];

describe('the catalogue', () => {
  it('has the fourteen forms of the table, each in a file of its own name', () => {
    expect(forms.map((form) => form.slug).sort()).toEqual(table.map(([slug]) => slug).sort());
    for (const { name, text } of files) expect(name).toBe(`${formSchema.parse(JSON.parse(text)).slug}.json`);
  });

  it.each(table)(
    '%s keeps its period, size and masses',
    (slug, period, length, width, finished, cast, poured, alloy, family) => {
      const form = bySlug.get(slug)!;
      expect(form.period).toBe(period);
      expect(form.dimensionsMm.length).toBe(length);
      if (width !== null) expect(form.dimensionsMm.width).toBe(width);
      expect(form.massesG).toEqual({ finished, cast, poured });
      expect(form.alloy).toBe(alloy);
      expect(form.family).toBe(family);
    },
  );

  it('offers only alloys the pages can name, the shown one among them', () => {
    for (const form of forms) {
      expect(form.alloys).toContain(form.alloy);
      for (const code of form.alloys) expect(studioAlloy(code), `${form.slug} ${code}`).toBeDefined();
    }
  });

  it('asks for adults wherever a blade or a sharp edge is offered, and says so', () => {
    for (const form of forms) {
      if (!form.bladed && !form.intendedEdges.includes('sharp')) continue;
      expect(form.cautions.join(' '), form.slug).toMatch(/adults only/);
    }
    expect(
      forms
        .filter((form) => form.bladed)
        .map((form) => form.slug)
        .sort(),
    ).toEqual(['leaf-shaped-sword', 'riveted-dagger', 'spearhead']);
  });

  it('never claims age for a reproduction, nor a stock', () => {
    for (const { name, text } of files)
      expect(text, name).not.toMatch(/\b(original|authentic|ancient|in stock|museum)\b/i);
  });
});

describe('periods', () => {
  it('stand oldest first, Middle–Late under Late, unknown ones last', () => {
    const groups = byPeriod([...forms, { period: '19th c.', name: 'Door knocker' }]);
    expect(groups.map(([period]) => period.heading)).toEqual([
      'Early Bronze Age',
      'Middle Bronze Age',
      'Late Bronze Age',
      'Iron Age',
      'Middle Ages',
      'Age of powder',
      '19th c.',
    ]);
    expect(groups.flatMap(([, list]) => list)).toHaveLength(forms.length + 1);
    expect(periodOf('Middle–Late Bronze Age').heading).toBe('Late Bronze Age');
  });
});

describe('units', () => {
  // One inch is 25.4 mm and one avoirdupois ounce 28.349523125 g, both exact (NIST Handbook 44, appendix C).
  it('shows grams and millimetres as stored', () => {
    expect(massWords(720, 'metric')).toBe('720 g');
    expect(massWords(1600, 'metric')).toBe('1.60 kg');
    expect(lengthWords(7.5, 'metric')).toBe('7.5 mm');
  });

  it('shows ounces and inches: 453.59237 g is 16 oz, 254 mm is 10 in', () => {
    expect(massWords(453.59237, 'imperial')).toBe('16.0 oz');
    expect(lengthWords(254, 'imperial')).toBe('10.0 in');
    expect(lengthWords(46, 'imperial')).toBe('1.81 in');
  });
});
