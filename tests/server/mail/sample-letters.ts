import type { LetterData } from '../../../src/server/mail/letter-data';

const gbp = (minor: number) => ({ minor, currency: 'GBP' as const });
const isolde = { ref: 'MF-0181', title: 'Leaf-shaped sword from your file', name: 'Isolde Wintermere' };
const wren = { ...isolde, name: 'Wren Addlecombe' };
const sha = 'a3f19c0d5b7e2846a3f19c0d5b7e2846a3f19c0d5b7e2846a3f19c0d5b7e2846';
const leaves = { from: '2027-01-26', to: '2027-02-23' };
export const photoIds = ['018f0000-0000-7000-8000-000000000001', '018f0000-0000-7000-8000-000000000002'] as const;
const picture = (n: 0 | 1, caption: string) => ({ photoId: photoIds[n], caption, alt: `${caption}, seen from above` });

/** Sums of the worked example of one leaf-shaped sword in the studio's description of its job, section 4.7. */
const stages = [
  { label: 'First payment', when: 'on acceptance', amount: gbp(66_000) },
  { label: 'Second payment', when: 'when you approve the pattern', amount: gbp(54_600) },
  { label: 'Balance', when: 'before it is sent', amount: gbp(149_280) },
];
const quote = {
  ...isolde,
  revision: 1,
  total: gbp(269_880),
  tax: gbp(44_980),
  stages,
  includes: [
    'One sword cast by lost wax in tin bronze, 88 parts copper to 12 tin',
    'The pattern made from your file, yours to have again for two years',
    'Filing, hammered edges left blunt, and a wax finish',
    'Re-pours until one casting is sound',
    'Carriage in a rigid case to an address in the United Kingdom',
  ],
  roundsOfChange: 1,
  targetMass: { grams: 720, toleranceG: 36 },
  mark: 'A reed between two dots with year and number, on the grip flange',
  leaves,
  validUntil: '2026-12-31T17:00:00Z',
  termsVersion: '2026-1',
};

/** One letter of each kind, filled as the studio's pages would fill it. */
export const SAMPLES: LetterData = {
  M0: { link: 'http://localhost:4321/sign-in/confirm?ask=018f3b', code: '402917', minutes: 10 },
  M1: {
    ...isolde,
    received: [
      { label: 'Piece', value: 'Leaf-shaped sword, one piece' },
      { label: 'Alloy', value: 'TB88, tin bronze' },
      { label: 'Length', value: '620 mm' },
      { label: 'Wanted by', value: 'No fixed day' },
    ],
    files: ['sword-scan-final.stl', 'grip sections.pdf'],
    answerBy: '2026-12-03',
    books: 'open',
  },
  M2: {
    ...wren,
    kind: 'enquiry',
    customer: 'Isolde Wintermere',
    summary: [
      { label: 'Piece', value: 'Leaf-shaped sword, one piece' },
      { label: 'Use', value: 'Display and cutting practice on soft targets' },
      { label: 'Wanted by', value: 'No fixed day' },
      { label: 'Goes to', value: 'United Kingdom' },
    ],
    missing: ['One real dimension, to be sure of the file’s unit'],
    files: 2,
  },
  M3: {
    ...isolde,
    questions: [
      {
        text: 'How long is the piece from tip to the end of the grip?',
        why: 'Files carry no unit. One real length tells us whether yours is in millimetres or inches.',
      },
      { text: 'Who made the scan, and may it be used for a piece you buy?', why: 'Some licences forbid that.' },
    ],
    lapsesOn: '2026-12-22',
  },
  M5: {
    ...isolde,
    reason:
      'You asked for an aged surface and no mark.\nEvery piece of ours carries its mark, so that nobody can later be sold it as a find.',
    couldChange:
      'We would gladly make the same sword with our mark hidden inside the grip, where it cannot be seen in use.',
  },
  M6: {
    ...isolde,
    low: gbp(262_800),
    high: gbp(352_800),
    basis: 'With 20 % VAT, without carriage.',
    drivers: ['Thin blades fail to fill more often than other pieces', 'About 20 hours of filing and finishing'],
    assumptions: ['The file is in millimetres: 620 mm long', 'Edges left blunt', 'No haft or scabbard'],
    leaves,
    note: 'Your scan is clean. The grip end is thinner than we like, so we may ask you to allow half a millimetre more.',
  },
  M7: quote,
  M8: {
    ...quote,
    revision: 2,
    replaces: 1,
    changes: ['The mark moves from the blade to the grip flange', 'Carriage is now insured: 9.00 more'],
    note: 'As we said on the telephone.',
  },
  M11: {
    ...isolde,
    reader: 'customer',
    revision: 2,
    quoteSha256: sha,
    termsVersion: '2026-1',
    typedName: 'Isolde Wintermere',
    acceptedAt: '2026-12-01T20:14:00Z',
    total: quote.total,
    stages,
    payFirst: gbp(66_000),
    payBy: '2026-12-08',
  },
  M12: {
    ...isolde,
    booked: true,
    label: 'First payment',
    amount: gbp(66_000),
    receiptNo: 31,
    paidAt: '2026-12-01T20:20:00Z',
    leaves,
    place: 4,
    toCome: { amount: gbp(203_880), next: 'Second payment' },
    next: 'We write again when your piece is about to be started. You need do nothing until then.',
  },
  M13: { ...isolde, amount: gbp(66_000), heldUntil: '2026-12-08' },
  M14: {
    ...isolde,
    resumed: false,
    facts: [
      { label: 'Size', value: '620 × 46 mm' },
      { label: 'Alloy', value: 'TB88, tin bronze' },
      { label: 'Edge', value: 'Hammered, left blunt' },
      { label: 'Address', value: '3 Sedge Lane, Lennmouth' },
    ],
    objectBy: '2026-12-06',
    leaves,
  },
  M15: {
    ...isolde,
    gate: 'A',
    round: 1,
    pictures: [picture(0, 'The wax beside the scale bar'), picture(1, 'Where the mark will go')],
    note: 'The tip is a touch fuller than in your file, so that the metal reaches it.',
  },
  M16: {
    ...isolde,
    reader: 'customer',
    gate: 'A',
    photoSetSha256: sha,
    photos: 4,
    approvedAt: '2026-12-14T09:30:00Z',
    nextPayment: stages[1],
  },
  M19: {
    ...isolde,
    stage: 'sound',
    reached: 1,
    pieces: 1,
    next: 'fettled',
    pictures: [picture(0, 'Broken out and brushed, gates still on'), picture(1, 'The tip, filled to the end')],
    leaves,
  },
  M20: {
    ...isolde,
    cause: 'misrun',
    note: 'The last 40 mm of the tip stayed empty. We heat the mould a little more next time and feed the tip from both sides.',
    piece: 1,
    pieces: 1,
    picture: picture(0, 'The unfilled tip'),
    leaves: { from: '2027-02-09', to: '2027-03-02' },
    outerMoved: true,
  },
  M23: {
    ...isolde,
    pictures: [picture(0, 'The finished sword, both sides'), picture(1, 'The mark on the grip flange')],
    measured: [{ piece: 1, massG: 731, balanceMm: 148 }],
    balance: { amount: gbp(149_280), dueBy: '2027-02-20' },
    address: ['Isolde Wintermere', '3 Sedge Lane', 'Lennmouth', 'United Kingdom'],
  },
  M24: {
    ...isolde,
    carrier: 'Estuary Parcels',
    tracking: 'EP 4471 902 6',
    adultMustSign: true,
    parcel: 'A plain cardboard tube-box, 72 × 14 × 12 cm, 2.1 kg, with our name as sender',
  },
  M26: {
    ...isolde,
    finish: 'patinated',
    hafted: false,
    bladed: true,
    recordCode: 'REED-7KQ2-MF',
    lookUntil: '2027-03-12',
  },
};
