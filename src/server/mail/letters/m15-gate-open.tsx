import { GATE_WORDS } from './gate-words';
import { letter, pageOf } from './letter';
import { Note, P, Part, Pictures, Points } from './letter-parts';

/** A gate is open: photos to look at on the page. Approving takes a press there; silence approves nothing. */
export const m15 = letter('M15', {
  subject: ({ ref, gate }) => `Look and approve: the ${GATE_WORDS[gate].subject} for ${ref}`,
  body: (data, { enclosed }) => {
    const gate = GATE_WORDS[data.gate];
    return {
      heading: `Look at the ${gate.subject}`,
      preview: gate.open,
      about: data,
      name: data.name,
      lead: (
        <>
          <P>{gate.open}</P>
          {data.round > 1 && <P>This is round {data.round}, with the changes you asked for.</P>}
          {data.note && <Note words={data.note} />}
        </>
      ),
      next: {
        turn: 'yours',
        words:
          'Look at the photos on the page, then approve or ask for changes there. Take the time you need: silence never counts as a yes.',
      },
      link: { to: `${pageOf(data)}#gate`, label: 'Look at the photos' },
      details: (
        <>
          {data.pictures.length > 0 && (
            <Part title="The photos">
              <Pictures pictures={data.pictures} enclosed={enclosed} />
            </Part>
          )}
          <Part title="What your approval fixes">
            <Points items={gate.fixes} />
          </Part>
          <Part title="What can still change later">
            <Points items={gate.canChange} />
          </Part>
        </>
      ),
    };
  },
});
