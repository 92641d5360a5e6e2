import { SCRAP_CAUSES } from '../../../commission/making/making';
import { spanInWords } from '../letter-words';
import { letter, pageOf } from './letter';
import { Note, P, Part, Pictures } from './letter-parts';

/** A casting was scrapped: what went wrong in plain words, no charge, the dates now, and the choices if they move. */
export const m20 = letter('M20', {
  subject: ({ ref }) => `A casting for ${ref} failed, and we pour again`,
  body: (data, { enclosed }) => {
    const cause = SCRAP_CAUSES[data.cause];
    return {
      heading: 'A casting failed; we pour again',
      preview: `${cause.plain} There is no charge to you.`,
      about: data,
      name: data.name,
      lead: (
        <>
          <P>
            {data.pieces > 1 ? `The casting of piece ${data.piece} of ${data.pieces}` : 'The casting of your piece'} did
            not come out sound, so we have scrapped it. {cause.plain} The trade calls this “{cause.name.toLowerCase()}”.
          </P>
          {data.note && <Note words={data.note} />}
          <P>
            This is part of casting and is in our price already: there is no charge to you, and the metal goes back into
            the pot.
          </P>
          {data.picture && <Pictures pictures={[data.picture]} enclosed={enclosed} />}
        </>
      ),
      next: data.outerMoved
        ? {
            turn: 'yours',
            words:
              'The day we promised has to move. You may wait for the new one, or cancel and have your money back; tell us on the page or answer this mail.',
          }
        : { turn: 'ours', words: 'We make a new mould and pour again. The day we promised stays as it was.' },
      link: { to: pageOf(data), label: 'See your commission' },
      ...(data.leaves
        ? {
            details: (
              <Part title="When it leaves us now">
                <P>{spanInWords(data.leaves)}; the later day is the promise.</P>
              </Part>
            ),
          }
        : {}),
    };
  },
});
