import { describe, expect, it } from 'vitest';
import { DEAL_STATES, type DealState } from '../../src/commission/deal';
import type { TurnFacts } from '../../src/commission/turn/turn-facts';
import { listByTurn } from '../../src/commission/turn/turn-list';
import { whoseTurn } from '../../src/commission/turn/whose-turn';

const NOW = new Date('2027-03-10T12:00:00Z');
const days = (count: number) => new Date(NOW.getTime() + count * 86_400_000);

function facts(deal: DealState, more: Partial<TurnFacts> = {}): TurnFacts {
  return {
    deal,
    since: days(-2),
    now: NOW,
    questions: null,
    quote: null,
    payment: null,
    gate: null,
    pieces: null,
    heldUntil: null,
    ...more,
  };
}

const quote = { revision: 2, sentAt: days(-3), validUntil: days(6) };
const deposit = {
  label: 'Deposit',
  owedMinor: 66_000,
  currency: 'GBP' as const,
  dueAt: days(4),
  state: 'due' as const,
};
const pieces = { total: 6, done: 2, nextWork: 'Fettling', ahead: 3, scrapped: false, since: days(-1) };

// Who acts in each state follows the table of moves in the studio's own description of the job (T1 to T52).
describe('whose turn it is', () => {
  it.each<[DealState, Partial<TurnFacts>, string, RegExp]>([
    ['enquiry', {}, 'studio', /we read your enquiry/i],
    ['asking', { questions: { open: 2, askedAt: days(-1) } }, 'customer', /2 questions/],
    ['asking', { questions: { open: 1, askedAt: days(-1) } }, 'customer', /One question waits/],
    ['asking', {}, 'customer', /send the answers/i],
    ['estimated', {}, 'studio', /firm quote/],
    ['quoted', { quote }, 'customer', /revision 2 .* 6 days more/],
    ['quoted', { quote: { ...quote, validUntil: days(0.5) } }, 'customer', /today only/],
    ['quoted', { quote: { ...quote, validUntil: days(-1) } }, 'studio', /date has passed/],
    ['quoted', {}, 'studio', /withdrew/],
    ['agreed', { payment: deposit }, 'customer', /deposit of £660\.00 is due/],
    ['agreed', { payment: { ...deposit, state: 'on-its-way' } }, 'nobody', /do not pay twice/],
    ['agreed', {}, 'studio', /confirm the first payment/],
    ['booked', {}, 'studio', /place in the year is booked/],
    ['making', { pieces }, 'studio', /your 6 pieces; next comes fettling for 3 of them\./],
    ['making', { pieces: { ...pieces, total: 1, done: 0 } }, 'studio', /your piece; next comes fettling\./],
    ['making', { pieces: { ...pieces, scrapped: true } }, 'studio', /pour again at no charge/],
    ['making', { pieces: { ...pieces, done: 6 } }, 'studio', /through the workshop/],
    [
      'making',
      { pieces: { total: 1, done: 1, nextWork: null, ahead: 0, scrapped: false, since: days(-1) } },
      'studio',
      /through the workshop/,
    ],
    ['making', {}, 'studio', /starting/],
    ['making', { pieces, gate: { gate: 'A', state: 'open', at: days(-4) } }, 'customer', /wax or pattern/],
    ['making', { pieces, gate: { gate: 'A', state: 'changes', at: days(-4) } }, 'studio', /asked for changes/],
    ['making', { pieces, payment: { ...deposit, label: 'Stage payment at gate A' } }, 'customer', /is due/],
    ['held', {}, 'nobody', /is held/],
    ['held', { heldUntil: '2027-05-01' }, 'nobody', /until 1 May 2027/],
    ['finished', { payment: { ...deposit, label: 'Balance' } }, 'customer', /balance of £660\.00 is due/],
    ['finished', { payment: { ...deposit, state: 'overdue', dueAt: days(-9) } }, 'customer', /overdue/],
    ['finished', {}, 'studio', /pack it/],
    ['sent', {}, 'courier', /carrier has your piece/],
    ['delivered', {}, 'nobody', /arrived/],
    ['issue', {}, 'studio', /not right/],
    ['rework', {}, 'studio', /back at our bench/],
    ['rework', { payment: deposit }, 'customer', /is due/],
    ['lost', {}, 'studio', /missing/],
    ['closed', {}, 'nobody', /closed/],
    ['declined', {}, 'nobody', /owe nothing/],
    ['lapsed', {}, 'nobody', /lapsed/],
    ['cancelled', {}, 'nobody', /cancelled/],
  ])('%s with %o is the turn of %s', (deal, more, who, sentence) => {
    const turn = whoseTurn(facts(deal, more));
    expect(turn.who).toBe(who);
    expect(turn.sentence).toMatch(sentence);
    expect(turn.studioSentence).not.toBe('');
  });

  it('has a sentence that ends for every state, and never two turns', () => {
    for (const deal of DEAL_STATES) expect(whoseTurn(facts(deal)).sentence).toMatch(/[.!?]$/);
  });

  it('counts from when the ball was passed: the question, the quote, the gate, the missed day', () => {
    expect(whoseTurn(facts('asking', { questions: { open: 1, askedAt: days(-5) } })).since).toEqual(days(-5));
    expect(whoseTurn(facts('quoted', { quote })).since).toEqual(days(-3));
    expect(whoseTurn(facts('making', { gate: { gate: 'A', state: 'open', at: days(-4) } })).since).toEqual(days(-4));
    const overdue = { ...deposit, state: 'overdue' as const, dueAt: days(-9) };
    expect(whoseTurn(facts('finished', { payment: overdue })).since).toEqual(days(-9));
    expect(whoseTurn(facts('making', { pieces })).since).toEqual(days(-1));
    expect(whoseTurn(facts('enquiry')).since).toEqual(days(-2));
  });

  it('tells the studio how long is left or how late it is', () => {
    expect(whoseTurn(facts('quoted', { quote })).studioSentence).toBe('Quote, lapses in 6 days');
    expect(whoseTurn(facts('agreed', { payment: deposit })).studioSentence).toBe('Deposit, lapses in 4 days');
    const late = { ...deposit, state: 'overdue' as const, dueAt: days(-9) };
    expect(whoseTurn(facts('finished', { payment: late })).studioSentence).toBe('Deposit, overdue 9 days');
  });
});

describe('the list by turn', () => {
  it('puts each commission in one place, the oldest first, held ones apart', () => {
    const row = (ref: string, deal: DealState, since: number, more: Partial<TurnFacts> = {}) => ({
      ref,
      deal,
      turn: whoseTurn(facts(deal, { since: days(since), ...more })),
      messageAt: null,
    });
    const lists = listByTurn([
      row('a', 'enquiry', -1),
      row('b', 'booked', -8),
      row('c', 'held', -30),
      row('d', 'sent', -3),
      row('e', 'agreed', -2, { payment: deposit }),
      row('f', 'closed', -90),
    ]);
    const refsOf = (rows: { ref: string }[]) => rows.map((each) => each.ref);
    const { studio, customer, courier, held, nobody } = lists;
    const refs = {
      studio: refsOf(studio),
      customer: refsOf(customer),
      courier: refsOf(courier),
      held: refsOf(held),
      nobody: refsOf(nobody),
    };
    expect(refs).toEqual({ studio: ['b', 'a'], customer: ['e'], courier: ['d'], held: ['c'], nobody: ['f'] });
  });
});
