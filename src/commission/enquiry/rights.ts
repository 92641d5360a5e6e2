import { z } from 'zod';
import { DESIGN_SOURCES, LICENCES, type DesignSource, type Licence } from './enquiry-choices';

const keysOf = <K extends string>(choices: Record<K, unknown>) => Object.keys(choices) as [K, ...K[]];

/** What the studio settled about the rights in a design, with the reason it believes so. */
export const rightsSchema = z.object({
  designSource: z.enum(keysOf<DesignSource>(DESIGN_SOURCES), 'Choose where the design comes from.'),
  licence: z.preprocess((value) => (value === '' ? undefined : value), z.enum(keysOf<Licence>(LICENCES)).optional()),
  rightsNote: z
    .string('Say how you know.')
    .trim()
    .min(3, 'Say how you know: the letter, the page, the customer’s answer.')
    .max(1000, 'Keep the note under 1,000 characters.'),
});
export type Rights = z.output<typeof rightsSchema>;

/** Why a design may not be quoted yet; null when nothing stands in the way. */
export function rightsObstacle(rights: { designSource: DesignSource; licence?: Licence }): string | null {
  if (rights.designSource === 'unknown')
    return 'The source of the design is not known. Ask the customer, or record what you found out, before you quote.';
  if (rights.designSource !== 'internet') return null;
  if (rights.licence === 'non-commercial')
    return 'The file’s licence allows no commercial use, and a commission is one. Its maker’s written consent is needed first.';
  if (rights.licence === undefined || rights.licence === 'unknown')
    return 'The licence of the file is not known. Ask where it came from and record its terms before you quote.';
  return null;
}
