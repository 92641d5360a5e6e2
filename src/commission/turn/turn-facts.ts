import type { StageState } from '../balance';
import type { DealState } from '../deal';
import type { Currency } from '../money';

/** Who must act next. */
export type Turn = 'customer' | 'studio' | 'courier' | 'nobody';

/** What is known of a commission when it is asked whose turn it is. Instants in UTC. */
export interface TurnFacts {
  deal: DealState;
  /** When the deal came into its state. */
  since: Date;
  now: Date;
  /** Required questions without an answer, and when they were asked. */
  questions: { open: number; askedAt: Date } | null;
  /** The revision in force, if any. */
  quote: { revision: number; sentAt: Date; validUntil: Date } | null;
  /** The first stage payment that is due, overdue or on its way. */
  payment: { label: string; owedMinor: number; currency: Currency; dueAt: Date | null; state: StageState } | null;
  /** The open gate, or the last one at which changes were asked. */
  gate: { gate: string; state: 'open' | 'changes'; at: Date } | null;
  pieces: TurnPieces | null;
  heldUntil: string | null;
}

/** The work: how many pieces, the stage of the least advanced, how many are done, whether a casting was scrapped last. */
export interface TurnPieces {
  total: number;
  done: number;
  /** The work that comes next on the least advanced piece: "Fettling". */
  nextWork: string | null;
  /** How many pieces that work is still ahead of. */
  ahead: number;
  /** Since when the least advanced piece waits for that work. */
  since: Date;
  scrapped: boolean;
}

/** Whose turn it is, told to the customer and to the studio, and since when they wait. */
export interface WhoseTurn {
  who: Turn;
  /** To the customer: what happens next and who acts. */
  sentence: string;
  /** To the studio, short: a line of its list. */
  studioSentence: string;
  since: Date;
}

const DAY_MS = 24 * 60 * 60_000;

/** Whole days from one instant to another, never less than zero. */
export function daysBetween(from: Date, to: Date): number {
  return Math.max(0, Math.floor((to.getTime() - from.getTime()) / DAY_MS));
}

/** "today", "1 day", "4 days". */
export function dayCount(days: number): string {
  return days === 0 ? 'today' : days === 1 ? '1 day' : `${days} days`;
}

const LONG_DAY = new Intl.DateTimeFormat('en-GB', { dateStyle: 'long', timeZone: 'UTC' });

/** A calendar day YYYY-MM-DD as "5 January 2027". */
export function dayInWords(day: string): string {
  return LONG_DAY.format(new Date(`${day.slice(0, 10)}T00:00:00Z`));
}
