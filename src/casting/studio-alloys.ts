/** An alloy the studio pours, as its pages name and colour it. Prices, density and contraction live in the settings. */
export type StudioAlloy = {
  code: string;
  name: string;
  /** Nominal composition, mass %. */
  compositionPct: Record<string, number>;
  /** One plain sentence: colour and what it is like. */
  words: string;
  swatch: string;
  /** Handbook alloys it equals or lies between; empty when the table has none. */
  near: string[];
  /** How it stands to the handbook table, in a sentence. */
  standing: string;
};

/** The three alloys of the studio. The codes are those of its settings. */
export const studioAlloys: readonly StudioAlloy[] = [
  {
    code: 'TB90',
    name: 'Tin bronze, 90/10',
    compositionPct: { Cu: 90, Sn: 10 },
    words: 'Warm red-gold. The everyday bronze of the period, and the best to hammer an edge on.',
    swatch: '#c08a52',
    near: ['tin-bronze-90-10'],
    standing: 'This is the 90/10 tin bronze of the table.',
  },
  {
    code: 'TB88',
    name: 'Tin bronze, 88/12',
    compositionPct: { Cu: 88, Sn: 12 },
    words: 'A little paler and harder. Holds an edge longer and forgives less under the hammer.',
    swatch: '#c99a5c',
    near: ['tin-bronze-c90700', 'tin-bronze-c90900'],
    standing: 'It lies between the 89/11 and the 87/13 bronze of the table; no sheet for 88/12 itself was found.',
  },
  {
    code: 'RB85',
    name: 'Red brass, 85/15',
    compositionPct: { Cu: 85, Zn: 15 },
    words: 'Yellower than bronze, soft and easy to chase. Free of lead.',
    swatch: '#cf9f5a',
    near: [],
    standing:
      'The table has no sheet for a lead-free red brass of copper and zinc alone, so its values are the studio’s own settings and not a handbook’s. The leaded red brass of the table is another metal.',
  },
];

/** The studio's alloy with this code, or undefined when the settings hold one the pages do not know yet. */
export function studioAlloy(code: string): StudioAlloy | undefined {
  return studioAlloys.find((alloy) => alloy.code === code);
}

const elements: Record<string, string> = {
  Cu: 'copper',
  Sn: 'tin',
  Zn: 'zinc',
  Pb: 'lead',
  Al: 'aluminium',
  Si: 'silicon',
  Mn: 'manganese',
  Fe: 'iron',
  Ni: 'nickel',
  Ag: 'silver',
  As: 'arsenic',
  Be: 'beryllium',
  P: 'phosphorus',
  S: 'sulphur',
  Sb: 'antimony',
};

/** English name of a chemical symbol; the symbol itself when it is not one of ours. */
export function elementName(symbol: string): string {
  return elements[symbol] ?? symbol;
}

/** A composition in words: "Copper 90 %, tin 10 %". */
export function compositionWords(parts: Record<string, number | [number, number]>): string {
  const words = Object.entries(parts)
    .map(([symbol, share]) => `${elementName(symbol)} ${Array.isArray(share) ? share.join('–') : share} %`)
    .join(', ');
  return words.charAt(0).toUpperCase() + words.slice(1);
}
