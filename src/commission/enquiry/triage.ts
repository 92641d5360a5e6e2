import { z } from 'zod';
import { amountField, optionalText, textLines, tick, wholeNumber } from '../input-fields';

/** Why the studio says no, each with the sentence the customer reads and what could change it. */
export const DECLINE_REASONS = {
  capacity: {
    name: 'No room in the year',
    reason: 'Our year is full, and we would rather say so now than keep you waiting.',
    couldChange: 'You are welcome to ask again when our books open.',
  },
  technique: {
    name: 'Beyond what we can cast well',
    reason: 'This piece is beyond what we can cast well with our furnace and our hands.',
    couldChange:
      'A smaller size, thicker sections or another metal may bring it within reach; tell us if that would suit you.',
  },
  rights: {
    name: 'Rights in the design',
    reason: 'The rights in this design are not clear enough for us to copy it.',
    couldChange: 'Written permission from its owner, or a design of your own, would let us begin.',
  },
  ethics: {
    name: 'Could pass as old',
    reason:
      'We do not make pieces that could pass as old finds: every piece carries our mark, its year and a code, and none is aged to deceive.',
    couldChange: 'We gladly make the same piece with our mark, and can place it where it does not catch the eye.',
  },
  law: {
    name: 'Not lawful to make or send',
    reason: 'As we read the rules, we may not make this piece or send it where it is to go.',
    couldChange: 'If you hold a licence or an exemption, or it may go to another address, tell us.',
  },
} as const;
export type DeclineReason = keyof typeof DECLINE_REASONS;

const REASONS = Object.keys(DECLINE_REASONS) as [DeclineReason, ...DeclineReason[]];

/** Declining an enquiry (T5). */
export const declineSchema = z.object({
  reason: z.enum(REASONS, 'Choose why you decline; the customer is told.'),
  note: optionalText(1500, 'Keep your own words under 1,500 characters.'),
});
export type Decline = z.output<typeof declineSchema>;

const LOW = 'Give the lower end of the range as an amount, such as 330.';
const HIGH = 'Give the upper end of the range as an amount, such as 430.';
const WEEKS = 'Weeks are whole numbers from 1 to 260.';

/** The range the owner sends (T6): amounts typed in whole units are kept in minor units. */
export const sendEstimateSchema = z
  .object({
    lowMinor: amountField(LOW),
    highMinor: amountField(HIGH),
    drivers: textLines(8, 300, 'At most 8 lines of up to 300 characters.').refine(
      (lines) => lines.length > 0,
      'Say in a line or more what drives the price.',
    ),
    assumptions: textLines(12, 300, 'At most 12 lines of up to 300 characters.').refine(
      (lines) => lines.length > 0,
      'List at least one assumption; a range without any is a promise.',
    ),
    earliestWeeks: wholeNumber(WEEKS, 1, 260),
    latestWeeks: wholeNumber(WEEKS, 1, 260),
    note: optionalText(1500, 'Keep your own words under 1,500 characters.'),
  })
  .superRefine((range, context) => {
    if (range.highMinor <= range.lowMinor)
      context.addIssue({ code: 'custom', path: ['highMinor'], message: 'The upper end must be above the lower one.' });
    if (range.latestWeeks < range.earliestWeeks)
      context.addIssue({ code: 'custom', path: ['latestWeeks'], message: 'The later week cannot come first.' });
  });
export type SendEstimate = z.output<typeof sendEstimateSchema>;

/** The range as it is kept with the commission once it was sent. */
export interface OwnerEstimate extends Omit<SendEstimate, 'note'> {
  note?: string;
  currency: string;
  sentAt: string;
  modelVersion: string;
}

/** The answers a customer gives when a quote is accepted (T11). */
export const acceptSchema = z.object({
  revision: wholeNumber('Open the quote again: its revision was lost on the way.', 1, 999),
  typedName: z
    .string('Type your full name; it stands under the agreement.')
    .trim()
    .min(3, 'Type your full name; it stands under the agreement.')
    .max(120, 'A name has at most 120 characters.'),
  terms: tick.refine(Boolean, 'Tick that you have read the terms.'),
  bespoke: tick.refine(Boolean, 'Tick that you know the piece is made for you and cannot simply be sent back.'),
  mark: tick.refine(Boolean, 'Tick that the piece carries our mark, its year and its code.'),
  adult: tick,
});
export type Acceptance = z.output<typeof acceptSchema>;

/** A message between customer and studio. */
export const messageSchema = z.object({
  clientId: z
    .string('Reload the page and send again: the message’s number was lost on the way.')
    .regex(/^[A-Za-z0-9_-]{8,64}$/, 'Reload the page and send again: the message’s number was lost on the way.'),
  body: z
    .string('Write something first.')
    .trim()
    .min(1, 'Write something first.')
    .max(4000, 'Keep a message under 4,000 characters.'),
});
export type NewMessage = z.output<typeof messageSchema>;
