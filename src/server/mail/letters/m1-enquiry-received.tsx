import { dayInWords } from '../letter-words';
import { letter, pageOf } from './letter';
import { Facts, P, Part, Points } from './letter-parts';

/** Enquiry received: its number, what arrived, when we answer, whether the books are open. */
export const m1 = letter('M1', {
  subject: ({ ref }) => `Your enquiry ${ref} has reached us`,
  body: (data) => ({
    heading: 'Your enquiry has reached us',
    preview: `We answer by ${dayInWords(data.answerBy)}.`,
    about: data,
    name: data.name,
    lead: (
      <>
        <P>Thank you. We keep your enquiry under the number {data.ref}; please name it when you ring or write.</P>
        <P>
          {data.books === 'open'
            ? 'Our books are open: we take on new work at present.'
            : 'Our books are closed at present, so this enquiry is on the waiting list. We look at it in turn and tell you when a place comes free.'}
        </P>
      </>
    ),
    next: {
      turn: 'ours',
      words: `We read what you sent and answer by ${dayInWords(data.answerBy)}, with a question, with an estimate, or with the reason why we cannot make it.`,
    },
    link: { to: pageOf(data), label: 'See your enquiry' },
    details: (
      <>
        {data.received.length > 0 && (
          <Part title="What you asked for">
            <Facts rows={data.received} />
          </Part>
        )}
        <Part title="Files that arrived">
          {data.files.length > 0 ? <Points items={data.files} /> : <P>None. You can add some on the page.</P>}
        </Part>
      </>
    ),
  }),
});
