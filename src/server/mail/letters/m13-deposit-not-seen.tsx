import { dayInWords, moneyInWords } from '../letter-words';
import { letter, pageOf } from './letter';
import { P, Part } from './letter-parts';

/** First payment not seen: the place is still held, and until when. Never sent while a payment is on its way. */
export const m13 = letter('M13', {
  subject: ({ ref }) => `Your place for ${ref} is still held`,
  body: (data) => ({
    heading: 'We still hold your place',
    preview: `Until ${dayInWords(data.heldUntil)}.`,
    about: data,
    name: data.name,
    lead: (
      <P>
        The first payment of {moneyInWords(data.amount)} has not reached us yet. Your place is held until{' '}
        {dayInWords(data.heldUntil)}.
      </P>
    ),
    next: {
      turn: 'yours',
      words: `Pay ${moneyInWords(data.amount)} on the page by ${dayInWords(data.heldUntil)}. If you have thought better of it, do nothing: the agreement lapses then and nothing is owed.`,
    },
    link: { to: `${pageOf(data)}#money`, label: 'Pay on your commission’s page' },
    details: (
      <Part title="If you have paid already">
        <P>
          Payments from a bank account can take some working days. When yours is on its way you need do nothing; if you
          are in doubt, answer this mail and we look.
        </P>
      </Part>
    ),
  }),
});
