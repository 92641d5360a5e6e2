import { momentInWords, moneyInWords } from '../letter-words';
import { letter, pageOf } from './letter';
import { Figure, Note, P, Small } from './letter-parts';
import { QuoteDetails, taxInWords } from './quote-details';

/** The quote: one firm total, when it is paid, what it covers, what is promised, until when. */
export const m7 = letter('M7', {
  subject: ({ ref }) => `Your quote for ${ref}`,
  body: (data, frame) => ({
    heading: 'Your quote',
    preview: `${moneyInWords(data.total)}, firm until ${momentInWords(data.validUntil, frame.studio.timeZone)}.`,
    about: data,
    name: data.name,
    lead: (
      <>
        <P>This is our firm price for your piece, revision {data.revision}.</P>
        <Figure>{moneyInWords(data.total)}</Figure>
        <Small>{taxInWords(data)}</Small>
        {data.note && <Note words={data.note} />}
      </>
    ),
    next: {
      turn: 'yours',
      words: 'Read it, ask what is unclear, and accept it on the page when it suits you. Nothing is owed until you do.',
    },
    link: { to: `${pageOf(data)}/quote/${data.revision}`, label: 'Read the quote' },
    details: <QuoteDetails quote={data} frame={frame} />,
  }),
});
