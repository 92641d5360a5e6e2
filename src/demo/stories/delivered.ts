import { and, eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { taxedLine, sumDocument } from '../../commission/pricing/tax';
import { commissions } from '../../server/db/schema/commissions';
import { pieces } from '../../server/db/schema/making';
import { stagePayments } from '../../server/db/schema/quotes';
import { acceptedStages } from '../../server/money/ledger';
import { photo, work } from '../acts/bench';
import { message } from '../acts/deal';
import { arrive, finish, send } from '../acts/leaving';
import { pay } from '../acts/money';
import { move, note } from '../acts/records';
import { ago } from '../clock';
import { commissionOf, type Step, step, type World } from '../world';
import { booked, cast, inspected, patternApproved, patternShown, workedUp } from './arcs';

/** MF-0171: a socketed axe that went well from end to end and is closed. */
const AXE = 'MF-0171';

export const socketedAxe: Step[] = [
  ...booked(AXE, {
    customer: 'hester',
    signed: 'Hester Quillane',
    asked: {
      form: 'socketed-axe',
      wish: 'A socketed axe like the ones in the hoard cases at home, for my study. I would like to know how it was made, step by step.',
      phone: '+44 1632 960171',
    },
    days: { enquiry: 152, quote: 140, accept: 118, paid: 117 },
    to: { lines: ['Hester Quillane', '3 Withy Lane', 'Ostrey'] },
  }),
  ...patternShown(AXE, { started: ago(97, '10:10'), shown: ago(95, '16:25') }, [
    {
      picture: 'axe-pattern',
      stage: 'pattern',
      caption: 'The studio’s pattern with its mark on the face near the edge, bar 50 mm',
      alt: 'A reddish-brown pattern of a socketed axe with a loop lies on a slate; a bar of 50 mm lies below it.',
    },
  ]),
  ...patternApproved(AXE, 'hester', { approved: 93 }),
  ...cast(AXE, 6, { heatNo: 'H-112', pouredG: 380, castG: 214 }),
  ...workedUp(AXE, 6, 1.04),
  inspected(AXE, ago(49, '15:10'), { massG: 183, balanceMm: 57, edge: 'hammered, not sharp' }, [
    {
      picture: 'axe-final',
      stage: 'inspected',
      caption: 'Finished: filed, polished and waxed, 183 g',
      alt: 'A bright bronze socketed axe with three ribs and a side loop lies on dark cloth.',
    },
  ]),
  step(ago(48, '17:30'), (world) => finish(world, AXE)),
  step(ago(46, '19:05'), (world) => pay(world, AXE, 'before-dispatch')),
  step(ago(43, '11:40'), (world) =>
    send(world, AXE, {
      carrier: 'Fenland Parcels',
      tracking: 'FP 40 117 226',
      adult: false,
      looks: 'A plain brown carton, 26 cm long',
    }),
  ),
  step(ago(40, '13:15'), (world) => arrive(world, AXE, 'hester')),
  step(ago(39, '20:40'), (world) =>
    message(
      world,
      AXE,
      'hester',
      'It is on the desk in front of me. Lighter than I thought and so much finer. Thank you for every picture.',
    ),
  ),
  step(ago(39, '21:15'), (world) =>
    message(world, AXE, 'wren', 'That makes our evening. Wipe it with a dry cloth now and then, and it will stay so.'),
  ),
  step(ago(38, '09:20'), (world) =>
    note(world, AXE, 'care-reminder', { who: 'hester', sentence: 'Asked for one care reminder after six months.' }),
  ),
  step(ago(10, '03:00'), (world) =>
    move(world, AXE, 'T34', 'clock', {
      who: null,
      role: 'clock',
      sentence: 'Thirty days passed without an issue: the commission is closed.',
    }),
  ),
];

/** MF-0174: a dagger that came back to be refinished and is at the bench again. */
const DAGGER = 'MF-0174';

export const rivetedDagger: Step[] = [
  ...booked(DAGGER, {
    customer: 'ansel',
    signed: 'Ansel Brackenroyd',
    asked: {
      form: 'riveted-dagger',
      haft: 'wood-hilt',
      wish: 'The riveted dagger with its wooden hilt, bright, for a talk I give on early metalwork.',
      use: 'teaching',
      adult: true,
    },
    days: { enquiry: 148, quote: 146, accept: 144, paid: 143 },
    to: { lines: ['Ansel Brackenroyd', '11 Millrace', 'Tarrow'] },
  }),
  ...patternShown(DAGGER, { started: ago(127, '09:30'), shown: ago(125, '15:50') }, [
    {
      picture: 'dagger-wax',
      stage: 'pattern',
      caption: 'Wax with its rivet holes and the mark near the butt, bar 50 mm',
      alt: 'A reddish-brown wax of a broad dagger blade with rivet holes at its butt, beside a bar of 50 mm.',
    },
  ]),
  ...patternApproved(DAGGER, 'ansel', { approved: 123, paid: 121 }),
  ...cast(DAGGER, 8, { heatNo: 'H-109', pouredG: 460, castG: 249 }),
  ...workedUp(DAGGER, 8, 0.95),
  inspected(DAGGER, ago(83, '14:20'), { massG: 208, balanceMm: 61, edge: 'hammered, not sharp' }, [
    {
      picture: 'dagger-final',
      stage: 'inspected',
      caption: 'Finished and hilted, 208 g without the hilt',
      alt: 'A bright bronze dagger with a wooden hilt held by a curved row of rivets lies on dark cloth.',
    },
  ]),
  step(ago(82, '17:00'), (world) => finish(world, DAGGER)),
  step(ago(80, '10:12'), (world) => pay(world, DAGGER, 'before-dispatch')),
  step(ago(78, '12:30'), (world) =>
    send(world, DAGGER, {
      carrier: 'Fenland Parcels',
      tracking: 'FP 40 098 731',
      adult: true,
      looks: 'A plain flat carton, 40 cm long',
    }),
  ),
  step(ago(75, '16:45'), (world) => arrive(world, DAGGER, 'ansel')),
  step(ago(32, '21:10'), async (world) => {
    await move(world, DAGGER, 'T46', 'customer', {
      who: 'ansel',
      sentence: 'The customer told us of a stained face and a loose rivet.',
    });
    await message(
      world,
      DAGGER,
      'ansel',
      'After a wet weekend in the tent the blade has stained on one face, and one rivet turns. My own doing, I think. Could you refinish it?',
    );
  }),
  step(ago(31, '09:25'), (world) =>
    message(
      world,
      DAGGER,
      'wren',
      'Send it to us as it is. The rivet is on us; polishing the face anew is £85.00 and carriage back £26.00, both before VAT. Nothing starts before you say yes.',
    ),
  ),
  step(ago(30, '18:50'), (world) => message(world, DAGGER, 'ansel', 'Yes, please do. It goes off tomorrow.')),
  step(ago(24, '11:05'), openRework),
  step(ago(24, '11:30'), (world) =>
    message(
      world,
      DAGGER,
      'wren',
      'It is here and photographed. The refinishing can be paid on this page; we start once it is.',
    ),
  ),
  step(ago(18, '08:40'), (world) => pay(world, DAGGER, 'rework')),
  step(ago(17, '14:10'), (world) => work(world, DAGGER, 'davit', 'Filing and finishing', 45, 1)),
];

/** The dagger is back: what it looked like, the agreed refinishing as a payment of its own, the piece on its stage. */
async function openRework(world: World): Promise<void> {
  const { services } = world;
  const commission = await commissionOf(world, DAGGER);
  await move(world, DAGGER, 'T47', 'owner', {
    who: 'wren',
    sentence: 'The dagger arrived and is back at the bench: one face stained, one rivet loose. Refinishing agreed.',
    data: { free: ['rivet'], paid: ['polishing'] },
  });
  await photo(world, DAGGER, 'davit', {
    picture: 'dagger-back',
    stage: 'finished',
    caption: 'As it came back: stained along one face',
    alt: 'The dagger with its hilt on; the blade is dull and stained green along one side. A bar of 50 mm lies below it.',
  });
  const rate = 0.2;
  const { netMinor, taxMinor, grossMinor } = sumDocument([
    taxedLine('work', 'Refinishing', 8500, rate),
    taxedLine('carriage', 'Carriage back', 2600, rate),
  ]);
  const stages = await acceptedStages(services.db, commission.id);
  await services.db.insert(stagePayments).values({
    id: uuidv7(),
    commissionId: commission.id,
    quoteId: stages[0]!.quoteId,
    position: stages.length + 1,
    label: 'Refinishing and carriage back',
    trigger: 'rework',
    currency: 'GBP',
    netMinor,
    taxMinor,
    grossMinor,
    dueAt: new Date(services.now().getTime() + 14 * 24 * 60 * 60_000),
  });
  await services.db
    .update(pieces)
    .set({ stage: 'hardened', measured: null, updatedAt: services.now() })
    .where(and(eq(pieces.commissionId, commission.id), eq(pieces.number, 1)));
  await services.db
    .update(commissions)
    .set({ leavesFrom: null, leavesTo: null, dispatch: null })
    .where(eq(commissions.id, commission.id));
}
