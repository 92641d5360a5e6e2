import { z } from 'zod';
import {
  DESIGN_SOURCES,
  INTENDED_USES,
  LICENCES,
  MARK_PLACES,
  MARK_REFUSAL,
  type DesignSource,
  type IntendedUse,
  type Licence,
  type MarkPlace,
} from './enquiry-choices';
import { estimateRequestSchema, type EstimateRequest } from '../pricing/estimate-request';
import type { PricedForm } from '../pricing/form';
import { emptyIsNone, optionalText, tick } from '../input-fields';

const keysOf = <K extends string>(choices: Record<K, unknown>) => Object.keys(choices) as [K, ...K[]];
const NAME = 'Tell us your name, in up to 120 characters.';
const WISH = 'Tell us in a sentence or more what you have in mind.';
const CONSENT = 'We need your word that we may keep what you send, or we cannot read it.';
const BUDGET = 'A budget is a whole number, without pence. Leave it empty if you would rather not say.';

/** Who asks, what for, by when and with what right; beside the estimate's own fields. */
const wordsSchema = z.object({
  /** Made by the browser for this enquiry; pressing twice sends the same one. */
  clientId: z
    .string('Reload the page and send again: the form’s number was lost on the way.')
    .regex(/^[A-Za-z0-9_-]{8,64}$/, 'Reload the page and send again: the form’s number was lost on the way.'),
  name: z.string(NAME).trim().min(1, NAME).max(120, NAME),
  email: z
    .string('Give the address we should write to.')
    .trim()
    .toLowerCase()
    .max(254, 'This address is longer than any mail address can be.')
    .pipe(z.email('This does not look like a mail address. It should read like name@example.org.')),
  phone: optionalText(40, 'A telephone number has at most 40 characters.'),
  wish: z.string(WISH).trim().min(10, WISH).max(4000, 'Keep it under 4,000 characters; you can send files as well.'),
  use: z.enum(keysOf<IntendedUse>(INTENDED_USES), 'Choose what the piece is for.'),
  neededBy: z.enum(['none', 'season', 'date'], 'Choose whether there is a date.').default('none'),
  neededByDate: z.preprocess(emptyIsNone, z.iso.date('Give the date as year, month and day.').optional()),
  neededBySeason: optionalText(40, 'Name the season in a few words, such as spring 2027.'),
  designSource: z.enum(keysOf<DesignSource>(DESIGN_SOURCES), 'Choose where the design comes from.'),
  licence: z.preprocess(emptyIsNone, z.enum(keysOf<Licence>(LICENCES), 'Choose the file’s terms.').optional()),
  rightsNote: optionalText(1000, 'Keep the note on rights under 1,000 characters.'),
  mark: z.enum(keysOf<MarkPlace>(MARK_PLACES)).default('visible'),
  /** Whole pounds, euros or dollars of the chosen currency. */
  budget: z.preprocess(
    (value) => (typeof value === 'string' ? emptyIsNone(value.replace(/[\s,]/g, '')) : emptyIsNone(value)),
    z.coerce.number(BUDGET).int(BUDGET).min(1, BUDGET).max(1_000_000, BUDGET).optional(),
  ),
  adult: tick,
  consent: tick.refine((given) => given, CONSENT),
  uploads: z.preprocess(
    (value) => (typeof value === 'string' ? (value === '' ? [] : [value]) : value),
    z.array(z.uuid('One of the files lost its number; add it again.')).max(20, 'Send at most 20 files.').default([]),
  ),
  /** A field no person sees; whoever fills it is a program. */
  website: z.string().max(0, 'Leave the field called website empty: only programs fill it in.').default(''),
});
type Words = z.output<typeof wordsSchema>;

const checkedWords = wordsSchema.superRefine((words, context) => {
  const need = (path: keyof Words, message: string) => context.addIssue({ code: 'custom', path: [path], message });
  if (words.mark === 'none') need('mark', MARK_REFUSAL);
  if (words.neededBy === 'date' && !words.neededByDate) need('neededByDate', 'Give the date, or choose “no date”.');
  if (words.neededBy === 'season' && !words.neededBySeason)
    need('neededBySeason', 'Name the season, or choose “no date”.');
  if (words.designSource === 'internet' && !words.licence)
    need('licence', 'Choose the terms of the file you found; they stand on the page it came from.');
  if (words.designSource === 'museum-scan' && !words.rightsNote)
    need('rightsNote', 'Say which museum gave permission and how we can see it.');
});

/**
 * An enquiry as the form sends it: the estimate's fields and the words around them in one flat object. The one schema
 * is the type, the form's rule and the server's rule. Whether a catalogue form is bladed is checked by `missingDeclaration`.
 */
export const enquirySchema = estimateRequestSchema.and(checkedWords);
export type Enquiry = z.output<typeof enquirySchema>;
export type EnquiryInput = z.input<typeof enquirySchema>;

/** The estimate's part of an enquiry. */
export function requestOf(enquiry: Enquiry): EstimateRequest {
  return estimateRequestSchema.parse(enquiry);
}

/** True when the piece asked for is a blade: the form says so, or the asker of an own piece. */
export function isBladed(request: EstimateRequest, forms: readonly Pick<PricedForm, 'slug' | 'bladed'>[]): boolean {
  if (request.what === 'own') return request.bladed;
  return forms.find((form) => form.slug === request.form)?.bladed ?? false;
}

/** The sentence to show when a blade is wanted and nobody said to be 18; null when nothing is missing. */
export function missingDeclaration(bladed: boolean, adult: boolean): string | null {
  if (!bladed || adult) return null;
  return 'This piece is a blade. We sell blades to people aged 18 or over only; tick that you are, or ask an adult to enquire.';
}

const DAY = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'long', year: 'numeric', timeZone: 'UTC' });

/** When it is needed, in words. */
export function neededByWords(enquiry: Pick<Words, 'neededBy' | 'neededByDate' | 'neededBySeason'>): string {
  if (enquiry.neededBy === 'date' && enquiry.neededByDate) return DAY.format(new Date(enquiry.neededByDate));
  if (enquiry.neededBy === 'season' && enquiry.neededBySeason) return enquiry.neededBySeason;
  return 'No date';
}
