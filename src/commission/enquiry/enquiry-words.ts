import type { EnquiryInput } from './enquiry';

/** Names of an enquiry's own inputs, beside those of its estimate; the files' numbers are apart. */
export const WORD_FIELDS = [
  'clientId',
  'name',
  'email',
  'phone',
  'wish',
  'use',
  'neededBy',
  'neededByDate',
  'neededBySeason',
  'designSource',
  'licence',
  'rightsNote',
  'mark',
  'budget',
  'adult',
  'consent',
  'website',
] as const satisfies readonly (keyof EnquiryInput)[];
export type WordField = (typeof WORD_FIELDS)[number];

/** What stands in an enquiry's own inputs, as text; a ticked box is 'yes', an empty one ''. */
export type WordFields = Partial<Record<WordField, string>>;

export const WORD_TICKS = ['adult', 'consent'] as const satisfies readonly WordField[];

/** The words among what was typed; unknown names and lists are left out. */
export function readWords(typed: Record<string, unknown>): WordFields {
  return Object.fromEntries(
    WORD_FIELDS.flatMap((field) => {
      const value = typed[field];
      return typeof value === 'string' ? [[field, value]] : [];
    }),
  );
}
