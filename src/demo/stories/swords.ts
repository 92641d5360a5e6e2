import type { QuoteDraft } from '../../commission/pricing/quote-draft';
import { cancellationStatement } from '../../commission/pricing/cancellation';
import { formatMoney } from '../../commission/money';
import { and, eq, ne } from 'drizzle-orm';
import { stagePayments } from '../../server/db/schema/quotes';
import { lockCommission } from '../../server/commissions';
import { acceptedStages, bookEntry } from '../../server/money/ledger';
import { photo, reach, scrap, type Shot, work } from '../acts/bench';
import { accept, address, enquire, estimateSent, message, quote } from '../acts/deal';
import { pay } from '../acts/money';
import { move, note } from '../acts/records';
import { ago, pourDay } from '../clock';
import { swordFromFile } from '../drafts';
import { swordFile } from '../files/meshes';
import { commissionOf, type Step, step, type World } from '../world';
import { patternApproved, patternShown } from './arcs';

/** What both sword commissions asked for: the same size of sword, each from the customer’s own file. */
const ASKED = {
  what: 'own' as const,
  description: 'Leaf-shaped sword from your own file',
  massG: 720,
  longestMm: 620,
  thinnestMm: 2.4,
  bladed: true,
  alloy: 'TB88',
  finish: 'polished',
  edge: 'hammered',
  designSource: 'own' as const,
  adult: true,
};
const RANGE = {
  low: 2190,
  high: 2940,
  weeks: [8, 12] as [number, number],
  drivers: [
    'Your own file: pattern, rubber mould and wax are made for this one sword',
    'A long thin blade: one pour in four fails',
  ],
  assumptions: [
    'The file is closed and at finished size',
    'Finished mass 720 g, give or take 5 %',
    'Edges hammered and dressed, not sharp',
  ],
};

function swordDraft(desk: QuoteDraft): QuoteDraft {
  return {
    ...swordFromFile(),
    mark: desk.mark,
    shownRange: { lowMinor: RANGE.low * 100, highMinor: RANGE.high * 100 },
  };
}

function bookedSword(
  ref: string,
  who: {
    customer: string;
    signed: string;
    wish: string;
    phone: string;
    file: [name: string, scale: number];
    lines: string[];
  },
  days: { enquiry: number; estimate: number; quote: number; accept: number; paid: number },
): Step[] {
  const { customer, signed, wish, phone, file, lines } = who;
  return [
    step(ago(days.enquiry, '21:18'), (world) =>
      enquire(world, ref, customer, { ...ASKED, wish, phone }, [
        swordFile(world.services.config.contentFolder, ...file),
      ]),
    ),
    step(ago(days.estimate, '20:05'), (world) => estimateSent(world, ref, RANGE)),
    step(ago(days.quote, '19:50'), (world) => quote(world, ref, swordDraft)),
    step(ago(days.accept, '22:04'), async (world) => {
      await accept(world, ref, customer, signed);
      await address(world, ref, lines);
    }),
    step(ago(days.paid, '09:07'), (world) => pay(world, ref, 'acceptance')),
  ];
}

const SCALE = 'A bar of 50 mm lies beside it.';

function waxShots(picture: string): Shot[] {
  return [
    {
      picture,
      stage: 'pattern',
      caption: 'The wax at full length, bar 50 mm',
      alt: `A reddish-brown wax of a leaf-shaped sword lies across a grey board. ${SCALE}`,
    },
    {
      picture: `${picture}-grip`,
      stage: 'pattern',
      caption: 'Grip with its flanges and rivet holes',
      alt: `Close view of the wax sword’s flanged grip and shoulders. ${SCALE}`,
    },
  ];
}

/** MF-0180: the sword that was cancelled after gate A; what the studio keeps is what it had spent. */
const CANCELLED = 'MF-0180';

export const cancelledSword: Step[] = [
  ...bookedSword(
    CANCELLED,
    {
      customer: 'rafe',
      signed: 'Rafe Lindqvale',
      wish: 'A leaf-shaped sword from the file I drew after measured drawings of river finds. I want the weight right: 720 g.',
      phone: '+44 1632 960180',
      file: ['rafe-sword-v7.stl', 1.01],
      lines: ['Rafe Lindqvale', '8 Ropewalk', 'Saltby'],
    },
    { enquiry: 72, estimate: 70, quote: 69, accept: 66, paid: 65 },
  ),
  ...patternShown(CANCELLED, { started: ago(33, '09:40'), shown: ago(30, '16:00') }, waxShots('rafe-wax')),
  ...patternApproved(CANCELLED, 'rafe', { approved: 28 }),
  step(ago(23, '20:30'), (world) =>
    message(
      world,
      CANCELLED,
      'rafe',
      'I have lost my work and cannot go on with the sword. What have you spent, and what do I get back?',
    ),
  ),
  step(ago(22, '10:15'), cancelSword),
  step(ago(22, '10:40'), (world) =>
    message(
      world,
      CANCELLED,
      'wren',
      'I am sorry to hear it. The hours and materials up to the wax come to £499.40 before VAT, each line is in the history, and the rest is on its way back to you. The wax and the mould are yours if you come back to it within the year.',
    ),
  ),
];

/** The customer's cancellation: kept is what the hours and materials before the gate came to, the rest goes back. */
async function cancelSword(world: World): Promise<void> {
  const { services } = world;
  const { id } = await commissionOf(world, CANCELLED);
  const draft = swordFromFile();
  const spent = draft.lines.filter((line) => line.group === 'before-gate');
  const costToDateMinor = 49_940;
  const statement = cancellationStatement({
    cancelledBy: 'customer',
    paidNetMinor: 55_000,
    taxRate: 0.2,
    costToDateMinor,
    reusableMinor: 0,
  });
  const money = (minor: number) => formatMoney(minor, 'GBP');
  await move(world, CANCELLED, 'T41', 'customer', {
    who: 'rafe',
    sentence: `Cancelled by the customer. Spent so far ${money(statement.retained.grossMinor)} with VAT; ${money(statement.refund.grossMinor)} goes back.`,
    data: {
      ...statement,
      costToDateMinor,
      lines: spent.map(({ label, minutes, materialsMinor }) => ({ label, minutes, materialsMinor })),
    },
  });
  await services.db.transaction(async (tx) => {
    await lockCommission(tx, id);
    const [deposit] = await acceptedStages(tx, id);
    // Of a cancelled commission nothing more falls due.
    await tx
      .update(stagePayments)
      .set({ dueAt: null })
      .where(and(eq(stagePayments.commissionId, id), ne(stagePayments.trigger, 'acceptance')));
    await bookEntry(tx, {
      commissionId: id,
      stagePaymentId: deposit!.id,
      kind: 'refund',
      amountMinor: -statement.refund.grossMinor,
      currency: 'GBP',
      providerId: `re_demo_${CANCELLED}`,
      cause: { creditNote: true, statement },
      at: services.now(),
    });
  });
  await note(world, CANCELLED, 'refund', {
    who: 'tobias',
    sentence: `${money(statement.refund.grossMinor)} was paid back by credit note.`,
  });
}

/** MF-0181: the sword whose first pour failed at the tip; the margin went from 20.0 to 7.9 %. */
const SWORD = 'MF-0181';

export const leafShapedSword: Step[] = [
  ...bookedSword(
    SWORD,
    {
      customer: 'isolde',
      signed: 'Isolde Wintermere',
      wish: 'A sword after the leaf-shaped ones from the river, from my own file. I care about the balance and the true record of its making more than about shine.',
      phone: '+44 1632 960181',
      file: ['leaf-sword-620.stl', 1],
      lines: ['Isolde Wintermere', 'Orchard End', 'Nether Marle'],
    },
    { enquiry: 66, estimate: 64, quote: 60, accept: 56, paid: 55 },
  ),
  step(ago(54, '19:35'), (world) =>
    message(
      world,
      SWORD,
      'isolde',
      'Paid just now. May I ask for a picture of the wax with a ruler, when there is one?',
    ),
  ),
  step(ago(53, '08:45'), (world) =>
    message(
      world,
      SWORD,
      'wren',
      'You will get four, with a bar in each, and nothing is cast before you have said yes to them.',
    ),
  ),
  ...patternShown(SWORD, { started: ago(41, '09:15'), shown: ago(38, '16:35') }, [
    ...waxShots('isolde-wax'),
    {
      picture: 'isolde-wax-tip',
      stage: 'pattern',
      caption: 'The tip, 2.4 mm at its thinnest',
      alt: `Close view of the wax sword’s leaf-shaped point. ${SCALE}`,
    },
    {
      picture: 'isolde-wax-mark',
      stage: 'pattern',
      caption: 'Where the mark, year and code will stand: on the tang, under the grip plates',
      alt: 'Close view of the wax sword’s tang with a small mark of a reed between two dots.',
    },
  ]),
  ...patternApproved(SWORD, 'isolde', { approved: 36, paid: 33 }),
  step(pourDay(1, -2, '16:10'), async (world) => {
    await photo(world, SWORD, 'juno', {
      picture: 'isolde-shell',
      stage: 'mould',
      caption: 'The shell after its last coat, pouring cup at the grip',
      alt: 'A rough off-white ceramic shell in the shape of a sword with a wide cup at one end lies on dark slate.',
    });
    await reach(world, SWORD, 'juno', 'mould', { note: 'Shell of seven coats, burnt out overnight' });
  }),
  step(pourDay(1, 0, '14:40'), async (world) => {
    await photo(world, SWORD, 'juno', {
      picture: 'isolde-poured',
      stage: 'poured',
      caption: 'Poured at 14:38, cup still bright',
      alt: 'A glowing orange disc of metal in the cup of a mould half buried in dark sand.',
    });
    await reach(world, SWORD, 'juno', 'poured', { heatNo: 'H-124', massG: 1600 });
  }),
  step(pourDay(1, 1, '09:20'), scrapFirstPour),
  step(pourDay(1, 1, '20:55'), (world) =>
    message(
      world,
      SWORD,
      'isolde',
      'Thank you for telling me at once, and for the picture. I would rather wait than have one that was mended.',
    ),
  ),
  step(pourDay(1, 2, '08:30'), (world) =>
    message(
      world,
      SWORD,
      'tobias',
      'So would we. The next wax is in hand: a wider gate at the point, the shell warmer by 60 degrees. It goes in at the next pour day.',
    ),
  ),
];

async function scrapFirstPour(world: World): Promise<void> {
  const found = await photo(world, SWORD, 'juno', {
    picture: 'isolde-misrun',
    stage: 'sound',
    caption: 'Broken out: the metal froze 48 mm short of the tip',
    alt: 'A dull bronze sword casting with its gates still on; the blade ends in a rounded, ragged edge where the tip should be.',
  });
  await photo(world, SWORD, 'juno', {
    picture: 'isolde-misrun-close',
    stage: 'sound',
    caption: 'The end of the casting, close',
    alt: 'Close view of the rounded, uneven end of the bronze blade. A bar of 50 mm lies beside it.',
  });
  await work(world, SWORD, 'juno', 'Breaking out', 60, 1);
  await scrap(world, SWORD, 'juno', {
    piece: 1,
    from: 'poured',
    cause: 'misrun',
    note: 'The tip is missing over 48 mm. The shell had cooled on the way to the furnace.',
    photo: found,
  });
}
