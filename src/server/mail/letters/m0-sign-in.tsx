import { Text } from '@react-email/components';
import { letter } from './letter';
import { P, Small } from './letter-parts';
import { LOOK } from './letter-style';

/** Sign-in asked: one link, one code, and what to do if it was somebody else. Reads the same for every address. */
export const m0 = letter('M0', {
  subject: ({ enquiry, invitedAs }, { studio }) => {
    if (invitedAs) return `Your invitation to ${studio.name}`;
    return enquiry ? `Confirm your enquiry ${enquiry.ref} at ${studio.name}` : `Your sign-in code for ${studio.name}`;
  },
  body: ({ link, code, minutes, enquiry, invitedAs }) => ({
    heading: enquiry ? 'Confirm your enquiry' : invitedAs ? 'You are invited' : 'Sign in',
    preview: `The code is good for ${minutes} minutes.`,
    ...(enquiry ? { about: enquiry } : {}),
    lead: (
      <>
        {enquiry && <P>Your enquiry reaches us once we know that this address is yours.</P>}
        {invitedAs && <P>{invitedAs} There is no password: each time you sign in, we mail you a link and a code.</P>}
        <P>
          {invitedAs
            ? 'Open the page below, or type this code on our sign-in page:'
            : 'Type this code on the page you left open, on this device or another:'}
        </P>
        <Text style={LOOK.code}>{code}</Text>
        <Small>
          Good once, for {minutes} minutes.
          {invitedAs && ' Later, ask for a new one on our sign-in page with this address; the invitation stays.'}
        </Small>
      </>
    ),
    next: {
      turn: 'yours',
      words: 'Type the code, or open the page below and press its button. Opening it alone does nothing.',
    },
    link: { to: link, label: enquiry ? 'Open the page that confirms' : 'Open the sign-in page' },
    details: (
      <>
        <Text style={LOOK.heading}>If it was not you</Text>
        <P>
          Somebody typed this address on our pages, perhaps by mistake. You need do nothing: without the code or the
          button nobody gets in, and both run out by themselves.
        </P>
      </>
    ),
  }),
});
