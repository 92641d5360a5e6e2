/** States of the deal, one of the four facts of a commission (deal, pieces, money, whose turn). */
export const DEAL_STATES = [
  'enquiry',
  'asking',
  'estimated',
  'quoted',
  'agreed',
  'booked',
  'making',
  'held',
  'finished',
  'sent',
  'delivered',
  'issue',
  'rework',
  'lost',
  'closed',
  'declined',
  'lapsed',
  'cancelled',
] as const;
export type DealState = (typeof DEAL_STATES)[number];

/** Who may cause a move: a signed-in role, the clock, or a payment webhook. */
export type Mover = 'customer' | 'owner' | 'maker' | 'clock' | 'payment' | 'courier';

interface Move {
  from: readonly DealState[];
  to: DealState;
  by: readonly Mover[];
}

/** Moves of the deal. Moves of pieces are in `making`; money never moves the deal except T12. */
export const DEAL_MOVES = {
  T2: { from: ['enquiry', 'asking', 'estimated'], to: 'asking', by: ['owner'] },
  T3: { from: ['asking'], to: 'enquiry', by: ['customer'] },
  T4: { from: ['asking'], to: 'lapsed', by: ['clock'] },
  T5: { from: ['enquiry', 'asking', 'estimated', 'lapsed'], to: 'declined', by: ['owner'] },
  T6: { from: ['enquiry', 'estimated'], to: 'estimated', by: ['owner'] },
  T7: { from: ['enquiry', 'estimated'], to: 'quoted', by: ['owner'] },
  T8: { from: ['quoted'], to: 'quoted', by: ['owner'] },
  T9: { from: ['quoted'], to: 'lapsed', by: ['clock'] },
  T10: { from: ['lapsed'], to: 'quoted', by: ['owner'] },
  T11: { from: ['quoted'], to: 'agreed', by: ['customer'] },
  T12: { from: ['agreed'], to: 'booked', by: ['payment', 'owner'] },
  T13: { from: ['agreed'], to: 'lapsed', by: ['clock'] },
  T14: { from: ['booked'], to: 'making', by: ['maker', 'owner'] },
  T31: { from: ['making', 'rework'], to: 'finished', by: ['maker', 'owner'] },
  T32: { from: ['finished'], to: 'sent', by: ['owner'] },
  T33: { from: ['sent'], to: 'delivered', by: ['courier', 'customer', 'owner'] },
  T34: { from: ['delivered'], to: 'closed', by: ['clock', 'owner'] },
  T35: { from: ['quoted', 'agreed', 'booked', 'making'], to: 'held', by: ['customer', 'owner'] },
  T38: { from: ['held'], to: 'making', by: ['customer', 'owner'] },
  T41: { from: ['agreed', 'booked', 'making'], to: 'cancelled', by: ['customer'] },
  T42: { from: ['agreed', 'booked', 'making', 'held', 'finished'], to: 'cancelled', by: ['owner'] },
  T44: { from: ['sent'], to: 'lost', by: ['owner'] },
  T46: { from: ['delivered', 'closed'], to: 'issue', by: ['customer'] },
  T47: { from: ['issue'], to: 'rework', by: ['owner'] },
} as const satisfies Record<string, Move>;
export type DealMove = keyof typeof DEAL_MOVES;

/** True when `mover` may make `move` from `state`. */
export function mayMove(state: DealState, move: DealMove, mover: Mover): boolean {
  const { from, by }: Move = DEAL_MOVES[move];
  return from.includes(state) && by.includes(mover);
}

/** States in which the commission still needs somebody. */
export function isOpen(state: DealState): boolean {
  return !['closed', 'declined', 'lapsed', 'cancelled'].includes(state);
}

/** States in which the commission ended without a piece: nothing is payable and nothing left to decide. */
export const ENDED_STATES: ReadonlySet<DealState> = new Set(['lapsed', 'cancelled', 'declined']);

/** The state in a reader's words. */
export const DEAL_WORDS: Record<DealState, string> = {
  enquiry: 'Enquiry',
  asking: 'Questions asked',
  estimated: 'Estimate sent',
  quoted: 'Quoted',
  agreed: 'Agreed, first payment due',
  booked: 'Booked',
  making: 'Being made',
  held: 'Held',
  finished: 'Finished',
  sent: 'On its way',
  delivered: 'Delivered',
  issue: 'Issue open',
  rework: 'Back at the bench',
  lost: 'Parcel missing',
  closed: 'Closed',
  declined: 'Declined',
  lapsed: 'Lapsed',
  cancelled: 'Cancelled',
};
