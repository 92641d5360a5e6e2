import { expect, it } from 'vitest';
import { measureWords } from '../../src/casting/measure-words';

const box = { volumeMm3: 60_000, boxMm: [100, 30, 20] as [number, number, number], closed: true, problems: [] };

// 100 mm is 3.94 in at 25.4 mm to the inch (NIST Handbook 44, appendix C); 60 cm3 at 8.75 g/cm3 is 525 g.
it('says box, volume and mass of a closed solid in the chosen metal', () => {
  expect(measureWords(box, { name: 'Tin bronze, 90/10', densityGPerCm3: 8.75 })).toEqual([
    '100 × 30 × 20 mm (3.94 × 1.18 × 0.79 in), read as millimetres.',
    'The surface is closed: 60.0 cm³, 525 g in tin bronze, 90/10.',
  ]);
});

it('says why an open surface has no volume, and no mass with it', () => {
  const open = { ...box, volumeMm3: null, closed: false, problems: ['The surface is not closed.'] };
  expect(measureWords(open, { name: 'Tin bronze', densityGPerCm3: 8.75 })).toEqual([
    '100 × 30 × 20 mm (3.94 × 1.18 × 0.79 in), read as millimetres.',
    'The surface is not closed.',
  ]);
});
