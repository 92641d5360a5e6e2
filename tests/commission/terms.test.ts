import { createHash } from 'node:crypto';
import { expect, it } from 'vitest';
import { ALL_TERMS, CURRENT_TERMS, findTerms, termsText } from '../../src/commission/terms';

it('finds each published version, and no other', () => {
  for (const terms of ALL_TERMS) expect(findTerms(terms.version)).toBe(terms);
  expect(findTerms('1999-9')).toBeUndefined();
  expect(CURRENT_TERMS).toBe(ALL_TERMS[ALL_TERMS.length - 1]);
});

it('numbers clauses by section and place', () => {
  const text = termsText({
    version: '0',
    title: 'Terms',
    status: 'Draft.',
    sections: [
      { heading: 'First', clauses: ['One.', 'Two.'] },
      { heading: 'Second', clauses: ['Three.'] },
    ],
  });
  expect(text).toBe('Terms, version 0\n\nDraft.\n\n1 First\n1.1 One.\n1.2 Two.\n\n2 Second\n2.1 Three.\n');
});

it('points from the clause on changing one’s mind to the section on cancelling', () => {
  const text = termsText(CURRENT_TERMS);
  expect(text).toMatch(/^5\.1 .*clause 10 says/m);
  expect(text).toMatch(/^10 Cancelling$/m);
});

/** Quotes keep the hash of the terms they were written under, so a published text is never edited: add a version. */
const PUBLISHED: Record<string, string> = {
  '2026-1': '35c4b27cfea76ae01e6ee24705cce05e5526d04a4ab2bba9d13675fce073c96d',
};

it('leaves published versions as they were published', () => {
  const hashes = ALL_TERMS.map((terms) => [terms.version, createHash('sha256').update(termsText(terms)).digest('hex')]);
  expect(Object.fromEntries(hashes)).toEqual(PUBLISHED);
});
