import { expect, it } from 'vitest';
import { withinSentence, withPieces } from '../../src/commission/sentence';

it('keeps the names inside a label when it stands in a sentence', () => {
  expect(withinSentence('Stage payment at gate A')).toBe('stage payment at gate A');
});

it('says the number of pieces once', () => {
  expect(withPieces('Flat axe', 1)).toBe('Flat axe');
  expect(withPieces('Flat axe', 6)).toBe('Flat axe, 6 pieces');
  expect(withPieces('6 × Flat axe', 6)).toBe('6 × Flat axe');
});
