import type { ReactNode } from 'react';
import { LETTER_DATA, type LetterData } from '../letter-data';
import type { LetterId } from '../letter-ids';
import type { Frame } from '../render';

/** What one letter says; the layout sets it. */
export interface LetterContent {
  heading: string;
  /** The line a mailbox shows after the subject. */
  preview: string;
  /** Number and name of the commission, when the letter is about one. */
  about?: { ref: string; title: string };
  /** Set on the studio's own copies: nobody signs a letter to themselves. */
  toStudio?: boolean;
  /** The reader's name as they gave it. */
  name?: string;
  /** What happened. */
  lead: ReactNode;
  /** What happens next and who acts; `yours` is set apart. */
  next: { turn: 'yours' | 'ours' | 'nobody'; words: string };
  /** The one main link: a path on our own pages, or a whole address of ours. */
  link: { to: string; label: string };
  /** Below the parting line: what one looks up. */
  details?: ReactNode;
}

/** One letter of the mail catalogue. */
export interface Letter<L extends LetterId> {
  id: L;
  schema: (typeof LETTER_DATA)[L];
  subject: (data: LetterData[L], frame: Frame) => string;
  body: (data: LetterData[L], frame: Frame) => LetterContent;
}

/** Declares a letter: its number, its subject and what it says. */
export function letter<L extends LetterId>(id: L, words: Pick<Letter<L>, 'subject' | 'body'>): Letter<L> {
  return { id, schema: LETTER_DATA[id], ...words };
}

/** Path of the customer's page of a commission. */
export function pageOf({ ref }: { ref: string }): string {
  return `/commissions/${ref}`;
}
