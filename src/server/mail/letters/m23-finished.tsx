import type { LetterData } from '../letter-data';
import { dayInWords, massInWords, moneyInWords } from '../letter-words';
import { letter, pageOf, type LetterContent } from './letter';
import { Facts, P, Part, Pictures, Sums } from './letter-parts';

type Finished = LetterData['M23'];

/** Finished: the final photos, what it weighs, what is still to pay, and the address to check. */
export const m23 = letter('M23', {
  subject: ({ ref, measured }) => `Your ${measured.length > 1 ? 'pieces are' : 'piece is'} finished: ${ref}`,
  body: (data, { enclosed }) => ({
    heading: data.measured.length > 1 ? 'Your pieces are finished' : 'Your piece is finished',
    preview: data.balance ? `The balance is ${moneyInWords(data.balance.amount)}.` : 'Please check the address.',
    about: data,
    name: data.name,
    lead: (
      <>
        <P>{data.measured.length > 1 ? 'They are' : 'It is'} inspected, weighed and measured, and still with us.</P>
        <Pictures pictures={data.pictures} enclosed={enclosed} />
      </>
    ),
    ...whatNow(data),
    details: (
      <>
        <Part title="As measured">
          <Facts rows={data.measured.map((piece) => measuredRow(piece, data.measured.length))} />
        </Part>
        {data.balance && (
          <Part title="To pay">
            <Sums
              rows={[{ label: 'Balance', hint: `by ${dayInWords(data.balance.dueBy)}`, amount: data.balance.amount }]}
            />
          </Part>
        )}
        <Part title="Where it goes">
          {data.address.length > 0 ? (
            <P>{data.address.join(', ')}</P>
          ) : (
            <P>We have no address for it yet; please give it on the page.</P>
          )}
        </Part>
      </>
    ),
  }),
});

function whatNow(data: Finished): Pick<LetterContent, 'next' | 'link'> {
  if (!data.balance) {
    return {
      next: {
        turn: 'yours',
        words: 'Check the address below. When it is right you need do nothing: we pack and send.',
      },
      link: { to: pageOf(data), label: 'See the photos and the address' },
    };
  }
  return {
    next: {
      turn: 'yours',
      words: `Check the address below and pay the balance of ${moneyInWords(data.balance.amount)} by ${dayInWords(data.balance.dueBy)}. We pack when it has arrived.`,
    },
    link: { to: `${pageOf(data)}#money`, label: 'Pay the balance on the page' },
  };
}

function measuredRow(piece: Finished['measured'][number], pieces: number) {
  const balance = piece.balanceMm === undefined ? '' : `, balances ${piece.balanceMm} mm from the hand end`;
  return {
    label: pieces > 1 ? `Piece ${piece.piece}` : 'Finished mass',
    value: `${massInWords(piece.massG)}${balance}`,
  };
}
