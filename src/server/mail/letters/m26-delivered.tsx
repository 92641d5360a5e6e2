import { dayInWords } from '../letter-words';
import { careFor } from './care-words';
import { letter, pageOf } from './letter';
import { P, Part, Points } from './letter-parts';

/** Delivered: how to keep it, its record, and how to tell us of a fault within the days to look it over. */
export const m26 = letter('M26', {
  subject: ({ ref }) => `${ref} has arrived: how to keep it`,
  body: (data) => ({
    heading: 'It has arrived',
    preview: `Look it over by ${dayInWords(data.lookUntil)}.`,
    about: data,
    name: data.name,
    lead: (
      <P>
        Your piece is delivered. Hold it, look along its edges, weigh it in the hand: now is the time to find anything
        that is not as it should be.
      </P>
    ),
    next: {
      turn: 'yours',
      words: `Look it over by ${dayInWords(data.lookUntil)}. If something is wrong, write it on the page with a photo; we answer what we can do. If all is well you need do nothing.`,
    },
    link: { to: pageOf(data), label: 'Tell us of a fault, or look back' },
    details: (
      <>
        <Part title="How to keep it">
          <Points items={careFor(data)} />
        </Part>
        <Part title="Its record">
          <P>
            {data.recordCode ? `The code of its record of making is ${data.recordCode}. ` : ''}It is a reproduction made
            by us, and carries our mark. Keep this mail with it, and pass both on if it ever leaves your hands.
          </P>
        </Part>
      </>
    ),
  }),
});
