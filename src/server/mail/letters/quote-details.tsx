import type { LetterData } from '../letter-data';
import { massInWords, momentInWords, moneyInWords, spanInWords } from '../letter-words';
import type { Frame } from '../render';
import { Facts, Part, Points, Sums, stageSums, Small } from './letter-parts';

type Quote = LetterData['M7'] | LetterData['M8'];

/** What a quote promises and asks for; the same words for a first and a revised one. */
export function QuoteDetails({ quote, frame }: { quote: Quote; frame: Frame }) {
  return (
    <>
      <Part title="When you pay">
        <Sums rows={[...stageSums(quote.stages), { label: 'Total', amount: quote.total, strong: true }]} />
      </Part>
      <Part title="What is included">
        <Points items={quote.includes} />
        <Small>{roundsInWords(quote.roundsOfChange)}</Small>
      </Part>
      <Part title="What we promise">
        <Facts rows={promises(quote, frame)} />
      </Part>
    </>
  );
}

function promises(quote: Quote, { studio }: Frame) {
  const mass = quote.targetMass;
  return [
    ...(mass
      ? [{ label: 'Finished mass', value: `${massInWords(mass.grams)}, give or take ${massInWords(mass.toleranceG)}` }]
      : []),
    { label: 'Mark', value: quote.mark },
    { label: 'Leaves us', value: `${spanInWords(quote.leaves)}; the later day is the promise` },
    { label: 'Firm until', value: momentInWords(quote.validUntil, studio.timeZone) },
    { label: 'Terms', value: `Version ${quote.termsVersion}, on the quote’s page` },
  ];
}

/** The tax inside a total, in words. */
export function taxInWords(quote: Quote): string {
  const tax = quote.tax ? `with ${moneyInWords(quote.tax)} VAT in it` : (quote.taxNote ?? 'no VAT charged');
  return `All in, with carriage; ${tax}.`;
}

function roundsInWords(rounds: number): string {
  if (rounds === 0) return 'Changes after approval are priced before they are made.';
  const what = rounds === 1 ? 'One round of changes' : `${rounds} rounds of changes`;
  return `${what} at each look-and-approve stage ${rounds === 1 ? 'is' : 'are'} in the price. Later ones are priced before they are made.`;
}
