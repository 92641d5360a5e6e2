import type { LetterData } from '../letter-data';
import { dayInWords, momentInWords, moneyInWords } from '../letter-words';
import type { Frame } from '../render';
import { letter, pageOf, type LetterContent } from './letter';
import { Facts, P, Part, Small, Sums, stageSums } from './letter-parts';
import { LOOK } from './letter-style';

type Accepted = LetterData['M11'];

/** Accepted: both sides get what was agreed, how it is paid and when it lapses. No payment has been seen yet. */
export const m11 = letter('M11', {
  subject: ({ ref, reader }) => (reader === 'customer' ? `Agreed: ${ref}` : `${ref} was accepted`),
  body: (data, frame) => ({
    ...(data.reader === 'customer' ? forCustomer(data) : forOwner(data)),
    about: data,
    toStudio: data.reader === 'owner',
    name: data.name,
    details: <Agreed data={data} frame={frame} />,
  }),
});

function forCustomer(data: Accepted): Omit<LetterContent, 'details'> {
  return {
    heading: 'We have an agreement',
    preview: data.onCredit
      ? `The first payment, ${moneyInWords(data.payFirst)}, is due by ${dayInWords(data.payBy)}.`
      : `The first payment, ${moneyInWords(data.payFirst)}, reserves your place until ${dayInWords(data.payBy)}.`,
    lead: (
      <P>
        You accepted revision {data.revision} of our quote. This is your copy of what was agreed. We have not received a
        payment yet.
      </P>
    ),
    next: {
      turn: 'yours',
      words: data.onCredit
        ? `Pay ${moneyInWords(data.payFirst)} by ${dayInWords(data.payBy)}, on the page by card or bank. Your place is booked when it arrives; write to us if your purchase order needs something first.`
        : `Pay ${moneyInWords(data.payFirst)} on the page, by card or bank; we keep your place until ${dayInWords(data.payBy)}. Unpaid after that day the agreement lapses, and nothing is owed.`,
    },
    link: { to: `${pageOf(data)}#money`, label: 'Pay on your commission’s page' },
  };
}

function forOwner(data: Accepted): Omit<LetterContent, 'details'> {
  return {
    heading: 'A quote was accepted',
    preview: `${moneyInWords(data.total)}, first payment ${moneyInWords(data.payFirst)}.`,
    lead: (
      <P>
        {data.typedName} accepted revision {data.revision}. This is the studio’s copy of what was agreed. No payment has
        been received yet.
      </P>
    ),
    next: {
      turn: 'nobody',
      words: `The customer pays ${moneyInWords(data.payFirst)} by ${dayInWords(data.payBy)}; ${data.onCredit ? 'it has credit, so nothing lapses by itself' : 'otherwise the agreement lapses by itself'}.`,
    },
    link: { to: `/studio/commissions/${data.ref}`, label: 'Open the commission' },
  };
}

function Agreed({ data, frame }: { data: Accepted; frame: Frame }) {
  return (
    <>
      <Part title="When it is paid">
        <Sums rows={[...stageSums(data.stages), { label: 'Total', amount: data.total, strong: true }]} />
      </Part>
      <Part title="What was agreed">
        <Facts
          rows={[
            { label: 'Quote', value: `${data.ref}, revision ${data.revision}` },
            { label: 'Accepted by', value: data.typedName },
            { label: 'Accepted', value: momentInWords(data.acceptedAt, frame.studio.timeZone) },
            { label: 'Terms', value: `Version ${data.termsVersion}` },
          ]}
        />
      </Part>
      <Part title="Fingerprint of the agreed quote">
        <Small>
          <span style={LOOK.fingerprint}>{data.quoteSha256}</span>
        </Small>
        <Small>
          SHA-256 of the quote as accepted. Both sides hold the same one; were a word of the quote changed, it would no
          longer match.
        </Small>
      </Part>
    </>
  );
}
