import { withinSentence } from '../../../commission/sentence';
import { momentInWords, moneyInWords, spanInWords } from '../letter-words';
import { letter, pageOf } from './letter';
import { Facts, P, Part, Sums } from './letter-parts';

/** A payment was booked: the receipt, the place in the year, what comes next, and cancelling in one line. */
export const m12 = letter('M12', {
  subject: ({ ref, receiptNo }) => `Receipt ${receiptNo} for ${ref}`,
  body: (data, { studio }) => ({
    heading: data.booked ? 'Paid, and your place is booked' : 'Your payment has arrived',
    preview: `${moneyInWords(data.amount)} received.`,
    about: data,
    name: data.name,
    lead: (
      <P>
        We have received {moneyInWords(data.amount)} ({data.label}). Thank you.
        {data.booked && data.place && ` Its place in the queue for the bench is ${data.place}.`}
      </P>
    ),
    next: { turn: 'ours', words: data.next },
    link: { to: `${pageOf(data)}/receipts/${data.receiptNo}`, label: 'Open the receipt' },
    details: (
      <>
        <Part title={`Receipt ${data.receiptNo}`}>
          <Sums
            rows={[
              { label: data.label, amount: data.amount, strong: true },
              ...(data.toCome
                ? [
                    {
                      label: 'Still to come in all',
                      hint: `the next is the ${withinSentence(data.toCome.next)}`,
                      amount: data.toCome.amount,
                    },
                  ]
                : []),
            ]}
          />
        </Part>
        <Part title="Dates">
          <Facts
            rows={[
              { label: 'Received', value: momentInWords(data.paidAt, studio.timeZone) },
              ...(data.leaves
                ? [{ label: 'Leaves us', value: `${spanInWords(data.leaves)}; the later day is the promise` }]
                : []),
            ]}
          />
        </Part>
        {data.toCome && (
          <Part title="If you change your mind">
            <P>
              You may cancel while the piece is being made: we keep what the work has cost by then, line by line, and
              send the rest back.
            </P>
          </Part>
        )}
      </>
    ),
  }),
});
