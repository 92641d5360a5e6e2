import { plainTextSelectors, toPlainText } from '@react-email/render';

/** The plain-text part of a letter, from its HTML: same words, same order, rows of facts in columns. */
export function writeText(html: string): string {
  const text = toPlainText(html, {
    wordwrap: 78,
    selectors: [
      ...plainTextSelectors,
      { selector: 'h1', options: { uppercase: false, leadingLineBreaks: 2, trailingLineBreaks: 1 } },
      { selector: 'h2', options: { uppercase: false, leadingLineBreaks: 2, trailingLineBreaks: 1 } },
      { selector: 'hr', options: { length: 40 } },
      { selector: 'a', options: { linkBrackets: false } },
      { selector: 'p', options: { leadingLineBreaks: 2, trailingLineBreaks: 2 } },
      {
        selector: 'table.facts',
        format: 'dataTable',
        options: { uppercaseHeaderCells: false, colSpacing: 3, maxColumnWidth: 46 },
      },
    ],
  });
  return `${text
    .replace(/\u00a0/g, ' ')
    .replace(/\n{3,}/g, '\n\n')
    .trim()}\n`;
}
