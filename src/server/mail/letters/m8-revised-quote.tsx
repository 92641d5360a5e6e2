import { momentInWords, moneyInWords } from '../letter-words';
import { letter, pageOf } from './letter';
import { Figure, Note, P, Part, Points, Small } from './letter-parts';
import { QuoteDetails, taxInWords } from './quote-details';

/** A revised quote: what changed, and that the one before can no longer be accepted or paid. */
export const m8 = letter('M8', {
  subject: ({ ref, revision }) => `Your quote for ${ref}, revision ${revision}`,
  body: (data, frame) => ({
    heading: 'Your quote, revised',
    preview: `${moneyInWords(data.total)}, firm until ${momentInWords(data.validUntil, frame.studio.timeZone)}.`,
    about: data,
    name: data.name,
    lead: (
      <>
        <P>
          Revision {data.revision} takes the place of revision {data.replaces}, which is withdrawn and can no longer be
          accepted or paid.
        </P>
        <Figure>{moneyInWords(data.total)}</Figure>
        <Small>{taxInWords(data)}</Small>
        {data.note && <Note words={data.note} />}
      </>
    ),
    next: {
      turn: 'yours',
      words: 'Read what changed, and accept it on the page when it suits you. Nothing is owed until you do.',
    },
    link: { to: `${pageOf(data)}/quote/${data.revision}`, label: `Read revision ${data.revision}` },
    details: (
      <>
        <Part title={`What changed since revision ${data.replaces}`}>
          <Points items={data.changes} />
        </Part>
        <QuoteDetails quote={data} frame={frame} />
      </>
    ),
  }),
});
