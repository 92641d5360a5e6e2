import type { DealState } from '../deal';
import type { WhoseTurn } from './turn-facts';

/** A commission as a list by turn needs it. */
export interface TurnRow {
  deal: DealState;
  turn: WhoseTurn;
}

/** The studio's list: who is waited for, oldest first within each. */
export interface ListByTurn<T extends TurnRow> {
  studio: T[];
  customer: T[];
  courier: T[];
  held: T[];
  nobody: T[];
}

/** Sorts commissions by who must act; held ones stand apart, since a date and nobody's act ends them. */
export function listByTurn<T extends TurnRow>(rows: readonly T[]): ListByTurn<T> {
  const oldestFirst = [...rows].sort((a, b) => a.turn.since.getTime() - b.turn.since.getTime());
  const of = (wanted: keyof ListByTurn<T>) =>
    oldestFirst.filter((row) => (row.deal === 'held' ? 'held' : row.turn.who) === wanted);
  return {
    studio: of('studio'),
    customer: of('customer'),
    courier: of('courier'),
    held: of('held'),
    nobody: of('nobody'),
  };
}
