import { expect, it } from 'vitest';
import { measureWords, otherUnits } from '../../src/casting/measure-words';

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

// An axe of 142 × 62 × 11 mm is 5.59 × 2.44 × 0.433 in, and 0.142 × 0.062 × 0.011 m; an inch is 25.4 mm (NIST Handbook 44).
it('offers the units a small file may have been drawn in, and none for a usual size', () => {
  expect(otherUnits([5.59, 2.44, 0.433])).toEqual([
    { unit: 'inches', factor: 25.4, boxMm: [142, 62, 11] },
    { unit: 'centimetres', factor: 10, boxMm: [55.9, 24.4, 4.3] },
  ]);
  expect(otherUnits([0.142, 0.062, 0.011])).toEqual([{ unit: 'metres', factor: 1000, boxMm: [142, 62, 11] }]);
  expect(otherUnits([142, 62, 11])).toEqual([]);
});

it('never says that a small solid weighs nothing', () => {
  const small = { ...box, volumeMm3: 5.4, boxMm: [5.6, 2.4, 0.4] as [number, number, number] };
  expect(measureWords(small, { name: 'Tin bronze', densityGPerCm3: 8.75 })[1]).toBe(
    'The surface is closed: 0.01 cm³, less than 1 g in tin bronze.',
  );
});
