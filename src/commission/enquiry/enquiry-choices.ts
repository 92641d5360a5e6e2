/** Where a design comes from; decides which rights the studio must see before it may quote. */
export const DESIGN_SOURCES = {
  'studio-form': 'One of the studio’s forms',
  own: 'My own design',
  'public-find': 'A find as published in a book, paper or public record',
  'museum-scan': 'A scan or drawing from a museum, with its permission',
  internet: 'A file found on the internet',
  unknown: 'I do not know',
} as const;
export type DesignSource = keyof typeof DESIGN_SOURCES;

/** Terms a found file may stand under, in plain words. */
export const LICENCES = {
  'public-domain': 'Public domain, or no rights reserved',
  attribution: 'Free to use when the maker is named',
  'share-alike': 'Free to use, changes under the same terms',
  'non-commercial': 'Not for commercial use',
  bought: 'Bought, with the right to have it made',
  unknown: 'I do not know its terms',
} as const;
export type Licence = keyof typeof LICENCES;

/** What the piece is for; picks the questions the studio asks first. */
export const INTENDED_USES = {
  display: 'To look at and own',
  reenactment: 'Re-enactment or living history',
  teaching: 'Teaching and handling',
  museum: 'Museum or collection',
  film: 'Film, stage or photography',
  tool: 'To be used as a tool',
  gift: 'A gift',
  other: 'Something else',
} as const;
export type IntendedUse = keyof typeof INTENDED_USES;

/** Where the studio's mark goes. There is no choice without one; `none` is listed so that it can be answered. */
export const MARK_PLACES = {
  visible: 'Where it can be seen',
  discreet: 'Where it does not catch the eye, still legible',
  none: 'No mark',
} as const;
export type MarkPlace = keyof typeof MARK_PLACES;

/** Why no piece leaves without its mark, said to whoever asks for one that could pass as old. */
export const MARK_REFUSAL =
  'We do not make pieces without our mark, and never ones aged to pass as old finds: a good copy without a mark is sold on as an antiquity sooner or later. Every piece carries our mark, its year and a code. We gladly put them where they do not catch the eye, and we can darken the surface of a marked piece.';

const WITHOUT_MARK =
  /\b(un-?marked|no|not|without|skip|omit|leave (?:off|out)|remove|don[’']?t)\b[^.!?]{0,40}\b(mark|marks|marking|stamp|stamped|signature|maker[’']?s mark)\b|\bunmarked\b/i;
const AS_OLD =
  /\b(aged|age it|antiqued?|ancient|genuine|authentic|original|as old|look(?:s|ing)? old|pass(?:es|ing)? (?:as|for)|buried|dug ?up|excavated|detector find)\b/i;

/** True when the words ask for a piece that is both unmarked and made to look old. */
export function asksForForgery(words: string): boolean {
  return WITHOUT_MARK.test(words) && AS_OLD.test(words);
}
