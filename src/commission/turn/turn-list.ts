import type { DealState } from '../deal';
import type { WhoseTurn } from './turn-facts';

/** A commission as a list by turn needs it. */
export interface TurnRow {
  deal: DealState;
  turn: WhoseTurn;
  /** When the customer wrote the message that has no answer yet. */
  messageAt: Date | null;
}

/** Since when the studio waits or is waited for: a message that came in the customer's own turn counts from its arrival. */
export function waitingSince({ turn, messageAt }: Pick<TurnRow, 'turn' | 'messageAt'>): Date {
  return messageAt && turn.who !== 'studio' ? messageAt : turn.since;
}

/** The studio's list: who is waited for, oldest first within each. */
export interface ListByTurn<T extends TurnRow> {
  studio: T[];
  customer: T[];
  courier: T[];
  held: T[];
  nobody: T[];
}

/**
 * Sorts commissions by who must act; held ones stand apart, since a date and nobody's act ends them. A message without an
 * answer is the studio's to answer, whoever's turn it is otherwise.
 */
export function listByTurn<T extends TurnRow>(rows: readonly T[]): ListByTurn<T> {
  const oldestFirst = [...rows].sort((a, b) => waitingSince(a).getTime() - waitingSince(b).getTime());
  const of = (wanted: keyof ListByTurn<T>) => oldestFirst.filter((row) => placeOf(row) === wanted);
  return {
    studio: of('studio'),
    customer: of('customer'),
    courier: of('courier'),
    held: of('held'),
    nobody: of('nobody'),
  };
}

function placeOf({ deal, turn, messageAt }: TurnRow): keyof ListByTurn<TurnRow> {
  if (messageAt) return 'studio';
  return deal === 'held' ? 'held' : turn.who;
}
