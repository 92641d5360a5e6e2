import { z } from 'zod';
import type { DesignSource, IntendedUse, Licence } from './enquiry-choices';
import { unflatten } from '../input-fields';

/** A question the studio may ask, with the reason the customer reads beside it. */
export interface Suggestion {
  id: string;
  text: string;
  why: string;
}

/** What the checklist looks at to find what is missing. */
export interface EnquiryFacts {
  what: 'form' | 'own';
  use: IntendedUse;
  designSource: DesignSource;
  licence?: Licence;
  bladed: boolean;
  hafted: boolean;
  pieces: number;
  neededBy: 'none' | 'season' | 'date';
  /** Kinds of the files sent, and whether each mesh measured as closed. */
  files: readonly { kind: 'picture' | 'document' | 'mesh' | 'step'; closed?: boolean }[];
}

type Item = Suggestion & { asks: (facts: EnquiryFacts) => boolean };

const hasMesh = (facts: EnquiryFacts) => facts.files.some((file) => file.kind === 'mesh');

const ITEMS: readonly Item[] = [
  {
    id: 'source',
    text: 'Where does the design come from, and may we copy it?',
    why: 'We may only cast what its owner lets us copy. A link, a letter or the book’s page is enough.',
    asks: (facts) => facts.designSource === 'unknown',
  },
  {
    id: 'licence',
    text: 'Which licence did the file come with? A link to its page is best.',
    why: 'Some licences forbid having the thing made for money; then we need its maker’s consent.',
    asks: (facts) => facts.designSource === 'internet' && (!facts.licence || facts.licence === 'unknown'),
  },
  {
    id: 'real-dimension',
    text: 'What is one real dimension of the piece, in millimetres, and where is it measured?',
    why: 'A 3D file carries no unit. One true length tells millimetres from inches.',
    asks: hasMesh,
  },
  {
    id: 'closed',
    text: 'Can you send the file again as a closed surface, or may we close the holes for you?',
    why: 'An open surface has no volume, so we can reckon neither the metal nor the mass.',
    asks: (facts) => facts.files.some((file) => file.kind === 'mesh' && file.closed === false),
  },
  {
    id: 'pictures',
    text: 'Can you send pictures from the front, the side and the edge, with a ruler in them?',
    why: 'Small details move the hours more than the size does.',
    asks: (facts) => facts.what === 'own' && !facts.files.some((file) => file.kind === 'picture'),
  },
  {
    id: 'field',
    text: 'Which rules must it pass: blunt edges, a least thickness, a rounded tip?',
    why: 'Authenticity and safety officers differ, and an edge cannot be put back.',
    asks: (facts) => facts.use === 'reenactment' && facts.bladed,
  },
  {
    id: 'payers',
    text: 'Do all pieces go to one address and one payer?',
    why: 'A group price holds only while the number of pieces does.',
    asks: (facts) => facts.pieces > 1 && facts.use === 'reenactment',
  },
  {
    id: 'permission',
    text: 'Who signs the permission to copy, and is there an accession number to put on the papers?',
    why: 'A museum’s copy must be told from its original for as long as both exist.',
    asks: (facts) => facts.use === 'museum' || facts.designSource === 'museum-scan',
  },
  {
    id: 'mark-place',
    text: 'Where may the permanent mark go?',
    why: 'It stays legible on the finished piece; you may choose a place that does not show on display.',
    asks: (facts) => facts.use === 'museum' || facts.use === 'film',
  },
  {
    id: 'call-date',
    text: 'On which day must it be in your hands, and who may know of it before?',
    why: 'A pour can fail. We plan for two, so the day decides whether we can promise anything.',
    asks: (facts) => facts.use === 'film' || facts.neededBy === 'date',
  },
  {
    id: 'tool',
    text: 'What will it cut or strike?',
    why: 'An edge for wood is hammered thinner and harder than one for the wall.',
    asks: (facts) => facts.use === 'tool',
  },
  {
    id: 'haft',
    text: 'Which wood and length should the haft have, or will you haft it yourself?',
    why: 'The haft’s bed is cut to the casting, and the woods differ in weight.',
    asks: (facts) => facts.hafted,
  },
  {
    id: 'surface',
    text: 'Should the surface be bright, as cast, or darkened?',
    why: 'Filing to a bright surface is where most hours go.',
    asks: () => true,
  },
  {
    id: 'weight',
    text: 'Is there a weight or a balance point you hope for?',
    why: 'We promise a mass within a margin, so it has to be in the quote.',
    asks: (facts) => facts.bladed,
  },
];

/** The questions that fit what is missing, the most needed first. */
export function suggestQuestions(facts: EnquiryFacts): Suggestion[] {
  return ITEMS.filter((item) => item.asks(facts)).map(({ id, text, why }) => ({ id, text, why }));
}

const questionSchema = z.object({
  text: z.string('Write the question.').trim().min(5, 'Write the question.').max(600, 'Shorten the question.'),
  why: z
    .string('Say why it matters.')
    .trim()
    .min(5, 'Say why it matters; people answer what they understand.')
    .max(600, 'Shorten the reason.'),
});

/** Questions as the owner asks them: one to five, each with the reason it matters (T2). */
export const askSchema = z.preprocess(
  (input) => markEmpty(unflatten(input)),
  z.object({
    questions: z
      .array(questionSchema.nullable(), 'Ask at least one question.')
      .transform((list) => list.filter((question) => question !== null))
      .refine((list) => list.length > 0, 'Ask at least one question.')
      .refine((list) => list.length <= 5, 'Ask at most five questions at once; the rest can wait for the answers.'),
  }),
);
export type Ask = z.output<typeof askSchema>;

function markEmpty(input: unknown): unknown {
  if (typeof input !== 'object' || input === null || !('questions' in input)) return input;
  const list = input.questions;
  if (!Array.isArray(list)) return input;
  const questions = list.map((item: unknown) => {
    const { text = '', why = '' } = (item ?? {}) as Record<string, unknown>;
    return String(text).trim() === '' && String(why).trim() === '' ? null : item;
  });
  return { ...input, questions };
}

/** Five questions are open at once; over all rounds there are never so many. */
const MOST_ANSWERS = 100;

/** Answers by the question's id; an empty one is simply not given yet. `send` asks for T3. */
export const answersSchema = z.preprocess(
  unflatten,
  z.object({
    answers: z
      .record(z.uuid(), z.string().trim().max(4000, 'Keep an answer under 4,000 characters.'))
      .refine((answers) => Object.keys(answers).length <= MOST_ANSWERS, 'These are more answers than we asked for.')
      .default({}),
    send: z.preprocess((value) => value === true || value === 'send' || value === 'true', z.boolean()).default(false),
  }),
);
export type Answers = z.output<typeof answersSchema>;
