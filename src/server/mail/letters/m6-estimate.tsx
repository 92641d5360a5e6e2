import { moneyInWords, spanInWords } from '../letter-words';
import { letter, pageOf } from './letter';
import { Figure, Note, P, Part, Points, Small } from './letter-parts';

/** Estimate: a range with its reasons and assumptions, and that it is not an offer. */
export const m6 = letter('M6', {
  subject: ({ ref }) => `Our estimate for ${ref}`,
  body: (data) => ({
    heading: 'What your piece is likely to cost',
    preview: `${moneyInWords(data.low)} to ${moneyInWords(data.high)}. A range, not an offer.`,
    about: data,
    name: data.name,
    lead: (
      <>
        <P>From what we know so far, we expect it to come to</P>
        <Figure>
          {moneyInWords(data.low)} to {moneyInWords(data.high)}
        </Figure>
        <Small>{data.basis}</Small>
        <P>
          This is an estimate, not an offer: neither of us is bound by it. A quote, which is firm, comes when the open
          points below are settled.
        </P>
        {data.note && <Note words={data.note} />}
      </>
    ),
    next: {
      turn: 'ours',
      words: 'We work out the firm quote and send it to you. Write to us if the range does not suit you.',
    },
    link: { to: pageOf(data), label: 'See the estimate' },
    details: (
      <>
        <Part title="What the range depends on">
          <Points items={data.drivers} />
        </Part>
        <Part title="What we have assumed">
          <Points items={data.assumptions} />
        </Part>
        {data.leaves && (
          <Part title="When it could be done">
            <P>
              {spanInWords(data.leaves)}, if you decide soon. The range moves with the work that is booked before yours.
            </P>
          </Part>
        )}
      </>
    ),
  }),
});
