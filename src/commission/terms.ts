import first from './terms/2026-1.json' with { type: 'json' };

/** One version of the studio's terms. Clauses are numbered by their place: section 5, clause 2 is "5.2". */
export interface Terms {
  version: string;
  title: string;
  /** What the text is worth, in a sentence; printed above it. */
  status: string;
  sections: readonly { heading: string; clauses: readonly string[] }[];
}

/** Every version a quote may have been written under, oldest first. A published version is never edited. */
export const ALL_TERMS: readonly Terms[] = [first];

/** The version that new quotes freeze. */
export const CURRENT_TERMS: Terms = first;

/** The terms of that version, or undefined when there is no such version. */
export function findTerms(version: string): Terms | undefined {
  return ALL_TERMS.find((terms) => terms.version === version);
}

/** The terms as plain text with numbered clauses: what a quote's SHA-256 of its terms is taken over, in UTF-8. */
export function termsText(terms: Terms): string {
  const sections = terms.sections.map(({ heading, clauses }, index) => {
    const numbered = clauses.map((clause, place) => `${index + 1}.${place + 1} ${clause}`);
    return [`${index + 1} ${heading}`, ...numbered].join('\n');
  });
  return [`${terms.title}, version ${terms.version}`, terms.status, ...sections].join('\n\n') + '\n';
}
