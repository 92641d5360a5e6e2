import { spanInWords } from '../letter-words';
import { letter, pageOf } from './letter';
import { Note, P, Part, Pictures } from './letter-parts';
import { STAGE_WORDS } from './stage-words';

/** Progress: the stage that was reached, its photos, and what is next. */
export const m19 = letter('M19', {
  subject: ({ ref, stage }) => `${STAGE_WORDS[stage].heading}: ${ref}`,
  body: (data, { enclosed }) => {
    const { heading, done } = STAGE_WORDS[data.stage];
    return {
      heading,
      preview: done,
      about: data,
      name: data.name,
      lead: (
        <>
          <P>
            {done}
            {data.pieces > 1 && ` ${countInWords(data.reached, data.pieces)}`}
          </P>
          {data.note && <Note words={data.note} />}
          <Pictures pictures={data.pictures} enclosed={enclosed} />
        </>
      ),
      next: {
        turn: 'ours',
        words: data.next ? `Next ${STAGE_WORDS[data.next].ahead}.` : 'Next we write to you about sending it.',
      },
      link: { to: pageOf(data), label: 'See your commission' },
      ...(data.leaves
        ? {
            details: (
              <Part title="When it leaves us">
                <P>{spanInWords(data.leaves)}; the later day is the promise.</P>
              </Part>
            ),
          }
        : {}),
    };
  },
});

function countInWords(reached: number, pieces: number): string {
  return reached === pieces ? `All ${pieces} pieces are this far.` : `${reached} of ${pieces} pieces are this far.`;
}
