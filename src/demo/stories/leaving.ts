import { finish, send } from '../acts/leaving';
import { message } from '../acts/deal';
import { pay } from '../acts/money';
import { move, note } from '../acts/records';
import { ago, exactly } from '../clock';
import { type Step, step } from '../world';
import { booked, cast, inspected, patternApproved, patternShown, workedUp } from './arcs';

/** MF-0176: two spearheads, sent and lost on the way. */
const SPEARS = 'MF-0176';

export const spearheads: Step[] = [
  ...booked(SPEARS, {
    customer: 'odile',
    signed: 'Odile Farthingale',
    asked: {
      form: 'spearhead',
      pieces: 2,
      wish: 'A pair of the looped spearheads for two shafts that hang crossed in our hall.',
      phone: '+44 1632 960176',
      adult: true,
    },
    days: { enquiry: 106, quote: 103, accept: 99, paid: 98 },
    to: { lines: ['Odile Farthingale', 'Reed House', 'Lower Saltby'] },
  }),
  ...patternShown(SPEARS, { started: ago(85, '10:30'), shown: ago(82, '15:15') }, [
    {
      picture: 'spears-pattern',
      stage: 'pattern',
      caption: 'Both patterns with their marks on the sockets, bar 50 mm',
      alt: 'Two reddish-brown patterns of looped spearheads lie side by side above a bar of 50 mm.',
    },
  ]),
  ...patternApproved(SPEARS, 'odile', { approved: 80, paid: 79 }),
  ...cast(SPEARS, 4, { heatNo: 'H-116', pouredG: 250, castG: 134 }),
  ...workedUp(SPEARS, 4, 1.1),
  inspected(SPEARS, ago(25, '11:50'), { massG: (piece) => 110 + piece, balanceMm: 64, edge: 'hammered, not sharp' }, [
    {
      picture: 'spears-final',
      stage: 'inspected',
      caption: 'Both finished: 111 g and 112 g',
      alt: 'Two bright bronze spearheads with small loops on their sockets lie on dark cloth.',
    },
  ]),
  step(ago(24, '16:20'), (world) => finish(world, SPEARS)),
  step(ago(20, '18:44'), (world) => pay(world, SPEARS, 'before-dispatch')),
  step(ago(16, '10:35'), (world) =>
    send(world, SPEARS, {
      carrier: 'Fenland Parcels',
      tracking: 'FP 40 140 552',
      adult: true,
      looks: 'A plain brown carton, 30 cm long',
    }),
  ),
  step(ago(9, '19:20'), (world) =>
    message(world, SPEARS, 'odile', 'The tracking has said “at the depot” for five days now. Should I worry?'),
  ),
  step(ago(8, '08:55'), (world) =>
    message(
      world,
      SPEARS,
      'wren',
      'We asked the carrier this morning. If it has not been found in four days we count it as lost, and the loss is ours, not yours.',
    ),
  ),
  step(ago(4, '09:30'), (world) =>
    move(world, SPEARS, 'T44', 'owner', {
      who: 'wren',
      sentence:
        'No scan for ten days: the parcel counts as lost and a claim is open with the carrier. You choose whether we make both again or pay you back.',
      data: { claim: 'FP-C 2207', lastScan: 'depot' },
    }),
  ),
  step(ago(4, '09:50'), (world) =>
    message(
      world,
      SPEARS,
      'wren',
      'I am sorry: the carrier cannot find it. Choose what suits you better, both made again at no cost to you, or all your money back. There is no hurry; tell us here.',
    ),
  ),
];

/** MF-0178: a hafted flat axe, finished; the balance is nine days late and nothing leaves before. */
const AXE = 'MF-0178';

export const flatAxe: Step[] = [
  ...booked(AXE, {
    customer: 'maud',
    signed: 'Maud Evershade',
    asked: {
      form: 'flat-axe',
      haft: 'ash-haft',
      wish: 'A flat axe on an ash haft for our camp, dressed but not sharp, please. It must pass our authenticity officer.',
      use: 'reenactment',
      phone: '+44 1632 960178',
      neededBy: 'season',
      neededBySeason: 'before the spring muster',
    },
    days: { enquiry: 84, quote: 82, accept: 79, paid: 78 },
    to: { lines: ['Maud Evershade', '27 Sluice Row', 'Hexgate'] },
  }),
  ...patternShown(AXE, { started: ago(60, '11:00'), shown: ago(58, '14:40') }, [
    {
      picture: 'flat-axe-pattern',
      stage: 'pattern',
      caption: 'The pattern, mark on the butt where the haft hides it, bar 50 mm',
      alt: 'A reddish-brown pattern of a flat axe with a splayed edge lies above a bar of 50 mm.',
    },
  ]),
  ...patternApproved(AXE, 'maud', { approved: 56 }),
  ...cast(AXE, 3, {
    heatNo: 'H-118',
    pouredG: 540,
    castG: 341,
    shots: {
      mould: [
        {
          picture: 'flat-axe-mould',
          stage: 'mould',
          caption: 'Both halves of the sand mould before closing',
          alt: 'Two wooden frames of rammed sand lie open, each with the hollow of a flat axe and a channel to the edge.',
        },
      ],
    },
  }),
  ...workedUp(AXE, 3, 1),
  inspected(AXE, ago(24, '13:30'), { massG: 305, edge: 'dressed, not sharp' }, [
    {
      picture: 'flat-axe-final',
      stage: 'inspected',
      caption: 'Hafted and finished, head 305 g',
      alt: 'A bright bronze flat axe head, set in the cleft of a wooden haft and bound with cord, on dark cloth.',
    },
  ]),
  step(exactly(23, 95), (world) => finish(world, AXE)),
  step(exactly(6, 140), (world) =>
    note(world, AXE, 'reminder', {
      who: null,
      role: 'clock',
      sentence: 'The balance was three days late: a first reminder went out.',
      data: { ladder: 3 },
    }),
  ),
  step(exactly(6, 100), (world) =>
    message(
      world,
      AXE,
      'tobias',
      'A short reminder: the balance of £380.40 was due three days ago. If something is wrong or the month is tight, tell us here and we find a way. The axe waits for you.',
    ),
  ),
];
