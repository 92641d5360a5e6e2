import { and, eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { dayInWords } from '../../commission/turn/turn-facts';
import { commissions } from '../../server/db/schema/commissions';
import { attempts, pieces } from '../../server/db/schema/making';
import { palstaves } from '../drafts';
import { photo, reach, scrap, work } from '../acts/bench';
import { accept, address, enquire, estimateSent, message, quote } from '../acts/deal';
import { pay } from '../acts/money';
import { move, note } from '../acts/records';
import { ago, exactly, pourDay } from '../clock';
import { commissionOf, type Step, step, type World } from '../world';
import { booked, patternApproved, patternShown } from './arcs';

/** MF-0179: six palstaves for a park abroad, in euros; seven moulds, and the spare one paid off. */
const PARK = 'MF-0179';
const HEAT = 'H-121';

export const parkPalstaves: Step[] = [
  step(ago(76, '10:25'), (world) =>
    enquire(world, PARK, 'veldhaven', {
      form: 'palstave',
      pieces: 6,
      destination: 'NL',
      currency: 'EUR',
      buyer: 'institution',
      wish: 'Six palstaves that visitors may handle, four of them hafted for felling demonstrations. Our own mark must stand beside yours.',
      use: 'teaching',
    }),
  ),
  step(ago(74, '19:40'), (world) =>
    estimateSent(world, PARK, {
      low: 2530,
      high: 2760,
      weeks: [8, 12],
      drivers: ['Six from one altered pattern', 'Hafts for four of them'],
      assumptions: ['Tin bronze, 90/10', 'One altered mark on the studio’s pattern', 'Sent to one address'],
    }),
  ),
  step(ago(70, '20:10'), (world) =>
    quote(world, PARK, (desk) => ({
      ...palstaves(),
      mark: 'A reed between two dots, year and code, under the stop; the park’s mark beside it',
      shownRange: { lowMinor: 212_000, highMinor: 231_000 },
      validityDays: desk.validityDays,
    })),
  ),
  step(ago(66, '11:20'), async (world) => {
    await accept(world, PARK, 'veldhaven', 'M. Terhorst, for Veldhaven Open-Air Park');
    await address(world, PARK, ['Veldhaven Open-Air Park', 'Dijkweg 2', 'Veldhaven'], 'NL');
  }),
  step(ago(64, '09:30'), (world) => pay(world, PARK, 'acceptance')),
  ...patternShown(PARK, { started: ago(47, '10:00'), shown: ago(44, '15:30') }, [
    {
      picture: 'palstave-pattern',
      stage: 'pattern',
      caption: 'The altered pattern, both marks under the stop, bar 50 mm',
      alt: 'A reddish-brown pattern of a palstave with a side loop lies above a bar of 50 mm.',
    },
  ]),
  ...patternApproved(PARK, 'veldhaven', { approved: 42, paid: 40 }),
  step(pourDay(2, -2, '15:45'), makeMoulds),
  step(pourDay(2, 0, '13:20'), pourAll),
  step(pourDay(2, 1, '10:05'), breakOut),
  step(pourDay(2, 1, '16:20'), (world) =>
    message(
      world,
      PARK,
      'wren',
      'One of the six had a cold shut. We had rammed a seventh mould beside them, and that one came out sound, so your dates do not move.',
    ),
  ),
  step(pourDay(2, 5, '15:10'), async (world) => {
    await photo(world, PARK, 'davit', {
      picture: 'palstaves-fettled',
      stage: 'fettled',
      caption: 'Four of six fettled; two still wear their gates',
      alt: 'Four filed bronze palstaves in a row, and two dull ones with stubs of metal at the butt.',
    });
    await reach(world, PARK, 'davit', 'fettled', { pieces: [1, 2, 4, 5], ratio: 1.18 });
  }),
];

/** Seven moulds for six axes: the spare has no piece of its own until one is needed. */
async function makeMoulds(world: World): Promise<void> {
  const { services } = world;
  const { id, family } = await commissionOf(world, PARK);
  await photo(world, PARK, 'juno', {
    picture: 'palstave-mould',
    stage: 'mould',
    caption: 'One of seven moulds, open',
    alt: 'Two wooden frames of rammed sand lie open, each with the hollow of a palstave.',
  });
  await reach(world, PARK, 'juno', 'mould');
  await services.db.insert(attempts).values({
    id: uuidv7(),
    commissionId: id,
    number: 7,
    family,
    mouldNo: `${PARK}/7 spare`,
    mouldAt: services.now(),
    by: world.person('juno').id,
  });
  await work(world, PARK, 'juno', 'Moulding', 36);
  await note(world, PARK, 'spare-mould', {
    who: 'juno',
    sentence: 'A seventh, spare mould was rammed: cheaper than a second pour day if one casting fails.',
  });
}

const spare = (id: string) => and(eq(attempts.commissionId, id), eq(attempts.number, 7));

async function pourAll(world: World): Promise<void> {
  const { services } = world;
  const { id } = await commissionOf(world, PARK);
  await photo(world, PARK, 'juno', {
    picture: 'palstaves-poured',
    stage: 'poured',
    caption: 'Seven cups, one heat',
    alt: 'Seven glowing orange discs of metal in dark sand, in two rows.',
  });
  await reach(world, PARK, 'juno', 'poured', { heatNo: HEAT, massG: 800 });
  await services.db.update(attempts).set({ pouredAt: services.now(), heatNo: HEAT, pouredMassG: 800 }).where(spare(id));
}

/** Five sound, the third scrapped, and the spare's casting takes its place. The promise stands again as it was. */
async function breakOut(world: World): Promise<void> {
  const { services } = world;
  const before = await commissionOf(world, PARK);
  await reach(world, PARK, 'juno', 'sound', { pieces: [1, 2, 4, 5, 6], massG: (piece) => 498 + piece });
  const found = await photo(world, PARK, 'juno', {
    picture: 'palstave-cold-shut',
    stage: 'sound',
    piece: 3,
    caption: 'A cold shut across the blade of the third',
    alt: 'A dull bronze palstave with a dark seam running across its blade. A bar of 50 mm lies beside it.',
  });
  await scrap(world, PARK, 'juno', {
    piece: 3,
    from: 'poured',
    cause: 'cold-shut',
    note: 'A seam right through, above the edge.',
    photo: found,
  });
  const at = services.now();
  const third = and(eq(pieces.commissionId, before.id), eq(pieces.number, 3));
  const [piece] = await services.db.update(pieces).set({ stage: 'sound', updatedAt: at }).where(third).returning();
  await services.db
    .update(attempts)
    .set({ pieceId: piece!.id, result: 'sound', castMassG: 501, closedAt: at })
    .where(spare(before.id));
  await services.db.update(commissions).set({ leavesTo: before.leavesTo }).where(eq(commissions.id, before.id));
  await note(world, PARK, 'spare-mould', {
    who: 'juno',
    sentence:
      'The spare mould’s casting is sound and takes the place of piece 3. No second pour day; the dates stand as promised.',
    data: { piece: 3, attempt: 7, leavesTo: before.leavesTo },
  });
}

/** MF-0182: a mace head whose wax waits for the customer's look since four days. */
const MACE = 'MF-0182';

export const maceHead: Step[] = [
  ...booked(MACE, {
    customer: 'barnaby',
    signed: 'Barnaby Oxgate',
    asked: {
      form: 'knopped-mace-head',
      wish: 'The mace head with twelve points, bright, for the mantel. No shaft.',
      phone: '+44 1632 960182',
    },
    days: { enquiry: 48, quote: 46, accept: 43, paid: 42 },
    to: { lines: ['Barnaby Oxgate', 'The Old Maltings', 'Hexgate'] },
  }),
  ...patternShown(MACE, { started: ago(7, '09:50'), shown: exactly(4, 75) }, [
    {
      picture: 'mace-wax',
      stage: 'pattern',
      caption: 'The wax from the front, bar 50 mm',
      alt: 'A reddish-brown wax of a mace head with pyramid-shaped points lies above a bar of 50 mm.',
    },
    {
      picture: 'mace-wax-turned',
      stage: 'pattern',
      caption: 'Turned: the second row of points',
      alt: 'The same wax lying at an angle, its points casting shadows to the lower right.',
    },
    {
      picture: 'mace-wax-close',
      stage: 'pattern',
      caption: 'Two points close, edges as they will be filed',
      alt: 'Close view of two of the wax mace head’s points.',
    },
    {
      picture: 'mace-wax-mark',
      stage: 'pattern',
      caption: 'The mark: above the lower rim of the socket',
      alt: 'Close view of the end of the wax mace head; above its rim stands a small mark of a reed between two dots.',
    },
  ]),
];

/** MF-0183: three linstock heads for a film, held until its shooting days are known. */
const LINSTOCKS = 'MF-0183';

export const linstocks: Step[] = [
  ...booked(LINSTOCKS, {
    customer: 'harrow',
    signed: 'P. Venn, Cold Harrow art department',
    asked: {
      form: 'serpent-linstock',
      pieces: 3,
      buyer: 'institution',
      wish: 'Three linstock heads, one hero and two for the second unit, all alike. Please show nothing of them to anybody before release.',
      use: 'film',
      phone: '+44 1632 960183',
      mark: 'discreet',
    },
    days: { enquiry: 40, quote: 38, accept: 36, paid: 35 },
    to: { lines: ['Cold Harrow art department', 'Unit 4, Staithe Works', 'Ostrey'] },
  }),
  step(ago(13, '18:20'), (world) =>
    message(
      world,
      LINSTOCKS,
      'harrow',
      'The shoot has moved and we do not have the new days. Can you hold our place without starting?',
    ),
  ),
  step(ago(12, '09:10'), holdLinstocks),
  step(ago(12, '09:25'), (world) =>
    message(
      world,
      LINSTOCKS,
      'wren',
      'Held, and nothing is spent until you say go. The pictures of them stay between us.',
    ),
  ),
];

async function holdLinstocks(world: World): Promise<void> {
  const heldUntil = new Date(world.services.now().getTime() + 47 * 24 * 60 * 60_000).toISOString().slice(0, 10);
  await move(world, LINSTOCKS, 'T35', 'owner', {
    who: 'wren',
    sentence: `Held at the customer’s wish until ${dayInWords(heldUntil)}. Nothing has been spent yet; the place in the year stays theirs.`,
    data: { heldUntil, spentMinor: 0 },
  });
  await world.services.db
    .update(commissions)
    .set({ heldUntil, leavesFrom: null, leavesTo: null })
    .where(eq(commissions.ref, LINSTOCKS));
}

/** MF-0184: a sickle that is booked and waits its turn. */
export const sickle: Step[] = booked('MF-0184', {
  customer: 'tamsin',
  signed: 'Tamsin Reedham',
  asked: {
    form: 'socketed-sickle',
    wish: 'A sickle after the socketed ones, for the wall of our seed store, bright as the day it was made.',
  },
  days: { enquiry: 36, quote: 30, accept: 15, paid: 14 },
  draft: (draft) => ({ ...draft, dateRange: { earliestWeeks: 8, latestWeeks: 12 } }),
  to: { lines: ['Tamsin Reedham', 'Carr Farm', 'Fenny Marle'] },
});
