import { dayInWords, spanInWords } from '../letter-words';
import { letter, pageOf } from './letter';
import { Facts, P, Part } from './letter-parts';

/** About to start, or going on after a pause: the key facts once more, and some days to object. */
export const m14 = letter('M14', {
  subject: ({ ref, resumed }) => (resumed ? `Work on ${ref} goes on` : `We are about to start ${ref}`),
  body: (data) => ({
    heading: data.resumed ? 'Work goes on' : 'We are about to start',
    preview: `Look over the facts by ${dayInWords(data.objectBy)}.`,
    about: data,
    name: data.name,
    lead: (
      <P>
        {data.resumed ? 'Your piece is back on the bench.' : 'Your piece has reached the bench.'} Before metal is spent
        on it, please look over what we are going to make.
      </P>
    ),
    next: {
      turn: 'yours',
      words: `If something below is wrong, tell us by ${dayInWords(data.objectBy)}. If all is right you need do nothing.`,
    },
    link: { to: pageOf(data), label: 'Look it over, or write to us' },
    details: (
      <>
        <Part title="What we are making">
          <Facts rows={data.facts} />
        </Part>
        {data.leaves && (
          <Part title="When it leaves us">
            <P>{spanInWords(data.leaves)}; the later day is the promise.</P>
          </Part>
        )}
      </>
    ),
  }),
});
