import type { LetterData } from '../letter-data';
import { momentInWords, moneyInWords } from '../letter-words';
import type { Frame } from '../render';
import { GATE_WORDS } from './gate-words';
import { letter, pageOf, type LetterContent } from './letter';
import { Facts, P, Part, Small, Sums, stageSums } from './letter-parts';
import { LOOK } from './letter-style';

type Approved = LetterData['M16'];

/** A gate was approved: to both sides, which photos it was about and which payment falls due with it. */
export const m16 = letter('M16', {
  subject: ({ ref, gate }) => `Approved: the ${GATE_WORDS[gate].subject} for ${ref}`,
  body: (data, frame) => ({
    heading: `The ${GATE_WORDS[data.gate].subject} is approved`,
    preview: `${data.photos} photos, ${momentInWords(data.approvedAt, frame.studio.timeZone)}.`,
    about: data,
    toStudio: data.reader === 'owner',
    name: data.name,
    lead: (
      <P>
        {data.reader === 'customer' ? 'You' : 'The customer'} approved the {GATE_WORDS[data.gate].subject} on{' '}
        {momentInWords(data.approvedAt, frame.studio.timeZone)}.
      </P>
    ),
    ...(data.reader === 'customer' ? forCustomer(data) : forOwner(data)),
    details: <WhatWasApproved data={data} frame={frame} />,
  }),
});

function forCustomer(data: Approved): Pick<LetterContent, 'next' | 'link'> {
  const { after } = GATE_WORDS[data.gate];
  if (!data.nextPayment)
    return { next: { turn: 'ours', words: `Now ${after}.` }, link: { to: pageOf(data), label: 'See your commission' } };
  return {
    next: {
      turn: 'yours',
      words: `${data.nextPayment.label}, ${moneyInWords(data.nextPayment.amount)}, is due now. Once it has arrived ${after}.`,
    },
    link: { to: `${pageOf(data)}#money`, label: 'Pay on your commission’s page' },
  };
}

function forOwner(data: Approved): Pick<LetterContent, 'next' | 'link'> {
  return {
    next: data.nextPayment
      ? { turn: 'nobody', words: `The customer pays ${moneyInWords(data.nextPayment.amount)} first.` }
      : { turn: 'ours', words: 'The bench can go on.' },
    link: { to: `/studio/commissions/${data.ref}`, label: 'Open the commission' },
  };
}

function WhatWasApproved({ data, frame }: { data: Approved; frame: Frame }) {
  return (
    <>
      <Part title="What was approved">
        <Facts
          rows={[
            { label: 'Photos', value: data.photos === 1 ? 'One' : String(data.photos) },
            { label: 'Approved', value: momentInWords(data.approvedAt, frame.studio.timeZone) },
          ]}
        />
        <Small>
          Fingerprint of this set of photos: <span style={LOOK.fingerprint}>{data.photoSetSha256}</span>
        </Small>
      </Part>
      {data.nextPayment && (
        <Part title="Due now">
          <Sums rows={stageSums([data.nextPayment])} />
        </Part>
      )}
    </>
  );
}
