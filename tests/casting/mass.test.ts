import { expect, test } from 'vitest';
import { beforeLoss, massG, patternScale, volumeMm3 } from '../../src/casting/mass';

const MM3_PER_IN3 = 25.4 ** 3;
const G_PER_LB = 453.59237;

// 1 square inch x 1 foot of brass weighs 3.644 lb: density 8.405. Builder-Mechanic, chestofbooks.com.
test('a foot of square-inch brass weighs what the old rule says', () => {
  expect(massG(12 * MM3_PER_IN3, 8.405) / G_PER_LB).toBeCloseTo(3.644, 3);
});

// 171 3/7 cubic inches at 0.2779 lb per cubic inch weigh 47.64 lb. Shop Practice V2, "Weight of Forging", chestofbooks.com.
test('a forging of 171 3/7 cubic inches weighs 47.64 lb', () => {
  const density = (0.2779 * G_PER_LB) / (MM3_PER_IN3 / 1000);
  expect(massG(171.4286 * MM3_PER_IN3, density) / G_PER_LB).toBeCloseTo(47.64, 2);
});

test('volume and mass undo each other', () => expect(volumeMm3(massG(75_000, 8.78), 8.78)).toBeCloseTo(75_000, 9));

// 526 is 23 per cent less than 683.117. Shop Practice V2, "Foundry Practical Data", chestofbooks.com.
test('what goes in before a loss of 23 per cent', () => expect(beforeLoss(526, 0.23)).toBeCloseTo(683.117, 3));

// 3.2 kg at a casting yield of 55 % and a melt loss of 3 %: 5.8182 kg poured, 5.9981 kg charged. Definitions, own numbers.
test('poured and charged metal by yield and loss', () => {
  const poured = beforeLoss(3.2, 0.45);
  expect(poured).toBeCloseTo(5.8182, 4);
  expect(beforeLoss(poured, 0.03)).toBeCloseTo(5.9981, 4);
});

// 3/16 inch a foot for yellow brass (CDA data of C85400) is 1.5625 %, 15/64 for silicon brass (C87500) 1.9531 %; a 300 mm
// casting then needs a pattern of 304.762 or 305.976 mm by the contraction convention.
test.each([
  [3 / 16, 304.762],
  [15 / 64, 305.976],
])('a pattern allowance of %d inch a foot', (inches, length) =>
  expect(300 * patternScale(inches / 12)).toBeCloseTo(length, 3),
);
