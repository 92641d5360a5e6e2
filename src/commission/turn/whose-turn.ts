import type { DealState } from '../deal';
import { formatMoney } from '../money';
import { withinSentence } from '../sentence';
import { dayCount, dayInWords, daysBetween, type Turn, type TurnFacts, type WhoseTurn } from './turn-facts';
import { turnInMaking } from './turn-in-making';

/** Says whose turn it is. Every state of the deal has an answer. */
export function whoseTurn(facts: TurnFacts): WhoseTurn {
  return BY_STATE[facts.deal](facts);
}

const turn =
  (who: Turn, sentence: string, studioSentence: string) =>
  (facts: TurnFacts): WhoseTurn => ({ who, sentence, studioSentence, since: facts.since });

const BY_STATE: Record<DealState, (facts: TurnFacts) => WhoseTurn> = {
  enquiry: turn(
    'studio',
    'We read your enquiry and answer within two working days. You need do nothing.',
    'Enquiry to answer',
  ),
  asking,
  estimated: turn(
    'studio',
    'You have our estimate range. We work out a firm quote next; write to us if something should change.',
    'Estimate sent, quote to follow',
  ),
  quoted,
  agreed,
  booked: (facts) => paymentTurn(facts) ?? turn('studio', BOOKED, 'Booked, to be started')(facts),
  making: (facts) => paymentTurn(facts) ?? turnInMaking(facts),
  held: (facts) => ({
    who: 'nobody',
    sentence: facts.heldUntil
      ? `Your commission is held until ${dayInWords(facts.heldUntil)}. Nothing happens before then unless you ask.`
      : 'Your commission is held. Nothing happens until you or we take it up again.',
    studioSentence: facts.heldUntil ? `Held until ${dayInWords(facts.heldUntil)}` : 'Held',
    since: facts.since,
  }),
  finished: (facts) =>
    paymentTurn(facts) ??
    turn('studio', 'Your piece is finished and paid for. We pack it and send it next.', 'Paid, to be sent')(facts),
  sent: turn(
    'courier',
    'The carrier has your piece. Somebody must be there to take it in; then say on this page that it has arrived.',
    'With the carrier',
  ),
  delivered: turn(
    'nobody',
    'Your piece has arrived. If anything is not as promised, write to us within 14 days.',
    'Delivered, closes by itself',
  ),
  issue: turn('studio', 'You told us something is not right. We look into it and answer next.', 'Issue to answer'),
  rework: (facts) =>
    paymentTurn(facts) ??
    turn('studio', 'Your piece is back at our bench. We finish the work and write to you.', 'Back at the bench')(facts),
  lost: turn(
    'studio',
    'Your parcel is missing. We pursue the carrier and come to you with a choice: made again, or your money back.',
    'Parcel missing, choice to settle',
  ),
  closed: turn('nobody', 'This commission is closed. Its record and papers stay here.', 'Closed'),
  declined: turn('nobody', 'We could not take this on. You owe nothing.', 'Declined'),
  lapsed: turn(
    'nobody',
    'This commission has lapsed and you owe nothing. Write to us and we price it again.',
    'Lapsed, can be priced again',
  ),
  cancelled: turn('nobody', 'This commission was cancelled.', 'Cancelled'),
};

const BOOKED =
  'Your place in the year is booked. We write to you when your piece is about to be started; you need do nothing.';

function asking(facts: TurnFacts): WhoseTurn {
  const open = facts.questions?.open ?? 0;
  const since = facts.questions?.askedAt ?? facts.since;
  const count = open === 1 ? 'One question' : `${open} questions`;
  if (open === 0)
    return {
      who: 'customer',
      sentence: 'All your answers are saved. Press “Send the answers” and we go on.',
      studioSentence: 'Answers saved, not yet sent',
      since,
    };
  return {
    who: 'customer',
    sentence: `${count} ${open === 1 ? 'waits for your answer' : 'wait for your answers'} on this page; then we go on.`,
    studioSentence: `${count} open`,
    since,
  };
}

function quoted(facts: TurnFacts): WhoseTurn {
  const { quote, now } = facts;
  if (!quote || quote.validUntil <= now)
    return {
      who: 'studio',
      sentence: quote
        ? 'The quote’s date has passed. We price it again and send you a new revision.'
        : 'We withdrew the last revision and are working on a new one. You need do nothing.',
      studioSentence: quote ? 'Quote past its date' : 'Revision withdrawn, new one to send',
      since: quote ? quote.validUntil : facts.since,
    };
  const left = daysBetween(now, quote.validUntil);
  return {
    who: 'customer',
    sentence: `Quote revision ${quote.revision} is waiting for you. Read it and accept it, or write to us; it stands for ${left === 0 ? 'today only' : `${dayCount(left)} more`}.`,
    studioSentence: left === 0 ? 'Quote, lapses today' : `Quote, lapses in ${dayCount(left)}`,
    since: quote.sentAt,
  };
}

function agreed(facts: TurnFacts): WhoseTurn {
  return (
    paymentTurn(facts) ?? {
      who: 'studio',
      sentence: 'You accepted the quote. We confirm the first payment next.',
      studioSentence: 'Agreed, payment to be confirmed',
      since: facts.since,
    }
  );
}

function paymentTurn(facts: TurnFacts): WhoseTurn | null {
  const { payment, now } = facts;
  if (!payment || payment.state === 'paid' || payment.state === 'later') return null;
  const label = withinSentence(payment.label);
  const since = payment.state === 'overdue' && payment.dueAt ? payment.dueAt : facts.since;
  if (payment.state === 'on-its-way')
    return {
      who: 'nobody',
      sentence: `Your payment (${label}) is on its way; banks can take some days. Please do not pay twice.`,
      studioSentence: `${payment.label}, payment on its way`,
      since,
    };
  const sum = formatMoney(payment.owedMinor, payment.currency);
  if (payment.state === 'overdue') {
    const late = dayCount(payment.dueAt ? daysBetween(payment.dueAt, now) : 0);
    return {
      who: 'customer',
      sentence: `The ${label} of ${sum} is overdue. Pay it here, or write to us if there is trouble; the work waits.`,
      studioSentence: `${payment.label}, overdue ${late === 'today' ? 'since today' : late}`,
      since,
    };
  }
  return {
    who: 'customer',
    sentence: `The ${label} of ${sum} is due. Pay it on this page and we go on.`,
    studioSentence: dueWords(payment, facts),
    since,
  };
}

function dueWords(payment: NonNullable<TurnFacts['payment']>, { deal, now }: TurnFacts): string {
  if (!payment.dueAt) return payment.label;
  const left = dayCount(daysBetween(now, payment.dueAt));
  const verb = deal === 'agreed' ? 'lapses' : 'due';
  return left === 'today' ? `${payment.label}, ${verb} today` : `${payment.label}, ${verb} in ${left}`;
}
