import { render, screen, within } from '@testing-library/react';
import fc from 'fast-check';
import { expect, it } from 'vitest';
import { Distribution } from '../../src/components/ui/Distribution';
import { splitBars } from '../../src/components/ui/distribution-bars';

const bars = [
  { from: 100000, to: 120000, share: 0.5 },
  { from: 120000, to: 140000, share: 0.3 },
  { from: 140000, to: 160000, share: 0.2 },
];

it('gives the same figures as a table', () => {
  render(<Distribution bars={bars} currency="GBP" caption="What it may cost us" price={130000} />);
  const table = screen.getByRole('table', { name: 'What it may cost us' });
  const rows = within(table).getAllByRole('row').slice(1);
  expect(rows.map((row) => row.textContent)).toEqual([
    '£1,000 and £1,20050.0 %',
    '£1,200 and £1,40030.0 %',
    '£1,400 and £1,60020.0 %',
  ]);
});

it('splits the bar that the price cuts through, with the loss on the dear side', () => {
  const drawn = splitBars(bars, { price: 130000 });
  expect(drawn.line).toBeCloseTo(50, 9);
  expect(drawn.bars.map((bar) => bar.className)).toEqual(['bar', 'bar', 'bar-loss', 'bar-loss']);
  expect(drawn.bars[2]?.x).toBeCloseTo(50, 9);
});

it('marks the stretch a figure speaks about', () => {
  const drawn = splitBars(bars, { meant: { from: 100000, to: 140000 } });
  expect(drawn.bars.map((bar) => bar.className)).toEqual(['bar-meant', 'bar-meant', 'bar']);
  expect(drawn.line).toBeNull();
});

it('draws nothing out of nothing', () => {
  expect(splitBars([], { price: 1 })).toEqual({ bars: [], line: null });
});

it('keeps every bar on its field, tallest first in height, for any shares and any price', () => {
  const someShares = fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 1, maxLength: 24 });
  fc.assert(
    fc.property(someShares, fc.integer({ min: -10_000, max: 400_000 }), (shares, price) => {
      const any = shares.map((share, index) => ({ from: index * 10_000, to: (index + 1) * 10_000, share }));
      for (const bar of splitBars(any, { price }).bars) {
        expect(bar.x).toBeGreaterThanOrEqual(0);
        expect(bar.width).toBeGreaterThan(0);
        expect(bar.x + bar.width).toBeLessThanOrEqual(100.11);
        expect(bar.height).toBeGreaterThanOrEqual(0);
        expect(bar.height).toBeLessThanOrEqual(38);
      }
    }),
  );
});
