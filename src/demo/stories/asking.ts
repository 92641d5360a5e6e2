import { eq } from 'drizzle-orm';
import { suggestQuestions } from '../../commission/enquiry/checklist';
import { commissions } from '../../server/db/schema/commissions';
import { factsOf, readUploads } from '../../server/enquiry/enquiry-mails';
import { lapseQuotes } from '../../server/jobs/clock';
import { askQuestions } from '../../server/enquiry/questions';
import { recordRights } from '../../server/enquiry/rights';
import { declineEnquiry } from '../../server/enquiry/triage';
import { enquire, estimateSent, message, quote } from '../acts/deal';
import { ago, exactly } from '../clock';
import { gougeFileInInches } from '../files/meshes';
import { permissionLetter } from '../files/letter';
import { hiltFromScan, withMarksUnderFoot } from '../hilt-draft';
import { commissionOf, must, type Step, step, type World } from '../world';

/** MF-0177: four handles whose quote lapsed; it can be priced again with today's metal. */
const HANDLES = 'MF-0177';

export const beastHeads: Step[] = [
  step(ago(90, '20:12'), (world) =>
    enquire(world, HANDLES, 'corin', {
      form: 'beast-head-handle',
      pieces: 4,
      wish: 'Four of the beast-headed knife handles, for the knives of our supper club. All four alike.',
      use: 'gift',
    }),
  ),
  step(ago(87, '19:30'), (world) =>
    estimateSent(world, HANDLES, {
      low: 1580,
      high: 2050,
      weeks: [8, 12],
      drivers: ['The heads are chased by hand, each one'],
      assumptions: ['Red brass, 85/15', 'All four alike and to one address'],
    }),
  ),
  step(ago(38, '21:00'), (world) =>
    message(world, HANDLES, 'corin', 'We are agreed at last, all four of us. Please send the firm quote.'),
  ),
  step(exactly(35, 30), (world) => quote(world, HANDLES)),
  step(exactly(35, 20), (world) =>
    message(
      world,
      HANDLES,
      'wren',
      'Here it is. The price stands for thirty days; the metal’s price decides how long we can hold it.',
    ),
  ),
  step(exactly(5, 20), async (world) => {
    const lapsed = await lapseQuotes(world.services);
    if (lapsed !== 1) throw new Error(`The demo wanted one quote to lapse; ${lapsed} did.`);
  }),
];

/** MF-0185: a hilt from a museum's scan, at its second revision, to be paid on a purchase order. */
const HILT = 'MF-0185';

export const museumHilt: Step[] = [
  step(ago(33, '11:45'), async (world) => {
    await enquire(
      world,
      HILT,
      'museum',
      {
        form: 'figure-hilt',
        buyer: 'institution',
        wish: 'A handling copy of the figure hilt in our case 4, from our own scan, safe to touch and plainly marked as a reproduction.',
        use: 'museum',
        phone: '+44 1632 960185',
        designSource: 'museum-scan',
        rightsNote: 'Lenn Valley Museum gives permission to copy its own piece; the letter is attached.',
      },
      [permissionLetter()],
    );
    await world.services.db
      .update(commissions)
      .set({ buyer: { kind: 'institution', netDays: 30 } })
      .where(eq(commissions.ref, HILT));
  }),
  step(ago(32, '09:30'), async (world) => {
    const input = {
      designSource: 'museum-scan' as const,
      rightsNote: 'Permission letter of the museum, one copy, pattern kept for it alone.',
    };
    must(await recordRights(world.services, world.person('wren'), HILT, input), HILT);
  }),
  step(ago(31, '20:10'), (world) =>
    estimateSent(world, HILT, {
      low: 1620,
      high: 2080,
      weeks: [8, 12],
      drivers: [
        'A pattern and a rubber mould for this one piece, from your scan',
        'The surface is matched to photographs by hand',
      ],
      assumptions: [
        'Tin bronze, 90/10',
        'The scan is closed and to scale',
        'One handling copy, marked as a reproduction',
      ],
    }),
  ),
  step(ago(29, '20:25'), (world) => quote(world, HILT, hiltFromScan)),
  step(ago(26, '14:05'), (world) =>
    message(
      world,
      HILT,
      'museum',
      'Our registrar asks that the mark and the word “reproduction” stand where a visitor’s hand does not wear them, under the foot, and that both are cut into the wax. We order on 30 days.',
    ),
  ),
  step(exactly(24, -150), (world) => quote(world, HILT, withMarksUnderFoot)),
  step(exactly(24, -165), (world) =>
    message(
      world,
      HILT,
      'wren',
      'Revision 2 has both under the foot, cut into the wax. Revision 1 is withdrawn. Accept with your order’s number when you have it.',
    ),
  ),
];

/** MF-0186: a gouge from a found file without a unit; three questions are open. */
const GOUGE = 'MF-0186';

export const gougeQuestions: Step[] = [
  step(ago(9, '23:05'), (world) =>
    enquire(
      world,
      GOUGE,
      'jory',
      {
        form: 'socketed-gouge',
        wish: 'A socketed gouge from the file I send. I found it and changed the socket a little. I want to use it on green wood.',
        use: 'tool',
        designSource: 'internet',
        licence: 'unknown',
        adult: true,
      },
      [gougeFileInInches(world.services.config.contentFolder)],
    ),
  ),
  step(ago(8, '19:15'), askAboutGouge),
];

async function askAboutGouge(world: World): Promise<void> {
  const { services } = world;
  const commission = await commissionOf(world, GOUGE);
  const known = suggestQuestions(factsOf(commission, await readUploads(services.db, commission.id)));
  const of = (id: string) => {
    const item = known.find((each) => each.id === id);
    if (!item) throw new Error(`The checklist does not ask ${id}.`);
    return { text: item.text, why: item.why };
  };
  const unit = {
    text: 'In which unit was the file drawn? As millimetres the gouge would be 3.3 mm long.',
    why: 'In inches it would be 85 mm, which is a gouge. We would rather ask than guess.',
  };
  must(
    await askQuestions(services, world.person('wren'), GOUGE, {
      questions: [unit, of('real-dimension'), of('licence')],
    }),
    GOUGE,
  );
}

/** MF-0187: asked for on the telephone, aged and without a mark; declined. */
const UNMARKED = 'MF-0187';

export const unmarkedSword: Step[] = [
  step(ago(3, '15:20'), (world) =>
    enquire(
      world,
      UNMARKED,
      'withheld',
      {
        form: 'leaf-shaped-sword',
        wish: 'By telephone: a sword “aged, no mark please”. The caller did not say what for.',
        use: 'other',
        adult: true,
      },
      [],
      'wren',
    ),
  ),
  step(ago(2, '09:05'), async (world) => {
    must(await declineEnquiry(world.services, world.person('wren'), UNMARKED, { reason: 'ethics' }), UNMARKED);
  }),
];
