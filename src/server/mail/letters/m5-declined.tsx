import { letter, pageOf } from './letter';
import { Note, P, Part } from './letter-parts';

/** Declined: the plain reason, what could change it, thanks. */
export const m5 = letter('M5', {
  subject: ({ ref }) => `About your enquiry ${ref}`,
  body: (data) => ({
    heading: 'We have to say no',
    preview: 'Why, and what could change it.',
    about: data,
    name: data.name,
    lead: (
      <>
        <P>Thank you for asking us. We have looked at it with care and must say no, for this reason:</P>
        <Note words={data.reason} />
      </>
    ),
    next: {
      turn: 'nobody',
      words: 'This enquiry is closed. You owe us nothing, and another wish of yours is welcome.',
    },
    link: { to: pageOf(data), label: 'See your enquiry' },
    ...(data.couldChange
      ? {
          details: (
            <Part title="What could change it">
              <P>{data.couldChange}</P>
            </Part>
          ),
        }
      : {}),
  }),
});
