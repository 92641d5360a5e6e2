import fc from 'fast-check';
import type { EstimateFields } from '../../src/commission/pricing/estimate-fields';
import { card, forms } from './card';

const { rates } = card;
const codes = (list: readonly { code: string }[]) => list.map(({ code }) => code);
const whole = (min: number, max: number) => fc.integer({ min, max }).map(String);
const tick = fc.constantFrom('on', '');
const around = (own: number) => fc.integer({ min: 70, max: 140 }).map((share) => ((own * share) / 100).toFixed(1));

const common = {
  finish: fc.constantFrom(...codes(rates.finishes)),
  finishHours: fc.constantFrom('', '0', '4,5', '30'),
  pieces: whole(1, 24),
  rush: tick,
  destination: fc.constantFrom('GB', 'DE', 'US', 'JP'),
  currency: fc.constantFrom('GBP', 'EUR', 'USD'),
  buyer: fc.constantFrom('consumer', 'institution'),
};

const ofForm: fc.Arbitrary<EstimateFields> = fc.constantFrom(...forms).chain((form) =>
  fc.record({
    ...common,
    what: fc.constant('form'),
    form: fc.constant(form.slug),
    alloy: fc.constantFrom(...form.alloys),
    edge: form.intendedEdges.length > 0 ? fc.constantFrom(...form.intendedEdges) : fc.constant(''),
    haft: fc.constantFrom('', 'none', ...codes(form.haft)),
    lengthMm: around(form.dimensionsMm.length),
    widthMm: around(form.dimensionsMm.width),
    thicknessMm: form.dimensionsMm.thickness ? around(form.dimensionsMm.thickness) : fc.constant(''),
  }),
);

const ofOwn: fc.Arbitrary<EstimateFields> = fc.record({
  ...common,
  what: fc.constant('own'),
  description: fc.constantFrom('', 'A buckle after a find'),
  alloy: fc.constantFrom(...codes(rates.alloys)),
  edge: fc.constantFrom(...codes(rates.edges)),
  haft: fc.constantFrom('none', 'haft'),
  massG: fc.oneof(fc.constant(''), whole(5, 3000)),
  volumeMm3: whole(500, 400_000),
  longestMm: whole(20, 900),
  thinnestMm: whole(1, 60),
  cored: tick,
  bladed: tick,
  texture: fc.constantFrom('plain', 'worked', 'ornate'),
});

/** What somebody might put into the price page's inputs, forms and own pieces alike; nearly all can be priced. */
export const anyFields: fc.Arbitrary<EstimateFields> = fc.oneof({ weight: 2, arbitrary: ofForm }, ofOwn);
