import { costLine, type CostLine } from '../commission/pricing/cost-lines';
import { metalLines } from '../commission/pricing/metal-lines';
import type { QuoteDraft } from '../commission/pricing/quote-draft';
import { findAlloy, findFamily, heatMinor } from '../commission/pricing/rates';
import { soundnessOf } from '../commission/pricing/soundness';
import { demoRates } from './rates';

const bench = demoRates.benchRateMinorPerHour;
const desk = demoRates.deskRateMinorPerHour;

type Common =
  'ratesVersion' | 'metal' | 'soundness' | 'hand' | 'lateShare' | 'pricing' | 'massTolerance' | 'includedRounds';

function fromRates(alloyCode: string, familyCode: string): Pick<QuoteDraft, Common> {
  const metal = findAlloy(demoRates, alloyCode);
  const family = findFamily(demoRates, familyCode);
  if (!metal || !family) throw new Error(`The demo rates lack ${alloyCode} or ${familyCode}.`);
  return {
    ratesVersion: demoRates.version,
    metal: {
      code: metal.code,
      name: metal.plainName,
      ingotMinorPerKg: metal.ingotMinorPerKg,
      returnsMinorPerKg: metal.returnsMinorPerKg,
      meltLoss: metal.meltLoss,
    },
    soundness: { family: family.code, familyName: family.name, ...soundnessOf(family, demoRates.pricing.priorPours) },
    hand: family.hand,
    lateShare: family.lateShare,
    pricing: demoRates.pricing,
    massTolerance: demoRates.massTolerance,
    includedRounds: demoRates.includedRounds,
  };
}

function cost(
  group: CostLine['group'],
  id: string,
  label: string,
  time: { desk?: number; bench?: number; materials?: number },
  rest: Partial<CostLine> = {},
): CostLine {
  const minutes = time.desk ?? time.bench ?? 0;
  const rateMinorPerHour = time.desk === undefined ? bench : desk;
  return costLine({ id, label, group, minutes, rateMinorPerHour, materialsMinor: time.materials ?? 0, ...rest });
}

const repeating = { takesRepeatFactor: true };

/** One leaf-shaped sword from the buyer's own 3D file, TB88, lost wax. */
export function swordFromFile(): QuoteDraft {
  const common = fromRates('TB88', 'thin');
  const massesG = { finished: 720, cast: 880, poured: 1600 };
  const lines = [
    cost('before-gate', 'intake', 'Intake, research, drawing check', { desk: 90 }),
    cost('before-gate', 'file', 'File repair and scaling', { desk: 120 }),
    cost('before-gate', 'print', 'Printed pattern', { materials: 3400 }),
    cost('before-gate', 'pattern', 'Pattern finishing', { bench: 180 }),
    cost('before-gate', 'rubber', 'Rubber mould', { bench: 210, materials: 3440 }),
    cost('before-gate', 'gate-a', 'Gate A: photos and answers', { desk: 30 }),
    cost('after-gate', 'record', 'Certificate, mark, record', { desk: 45 }, { per: 'piece' }),
    cost('attempt', 'wax', 'Wax and gating', { bench: 75, materials: 300 }),
    cost('attempt', 'shell', 'Shell', { bench: 150, materials: 1600 }),
    cost('attempt', 'burnout', 'Burnout', { materials: 1100 }),
    cost('attempt', 'break-out', 'Break-out, cut-off, first look', { bench: 60 }),
    ...metalLines(massesG, common.metal, heatMinor(demoRates), demoRates.planningLoadG),
    cost('hand', 'fettle', 'Fettling', { bench: 420 }, { ...repeating, lostWhenLate: true }),
    cost('hand', 'edge', 'Edge hardening and straightening', { bench: 240 }, repeating),
    cost('hand', 'finish', 'Filing, polishing and wax', { bench: 480 }, repeating),
    cost('hand', 'inspect', 'Measuring and last look', { bench: 60 }, repeating),
    cost('sundries', 'abrasives', 'Abrasives, rivets, wax', { materials: 3600 }, { per: 'piece' }),
  ];
  return {
    title: 'Leaf-shaped sword from your own file',
    specification: [
      'Tin bronze, 88/12, cast in one piece',
      'Edges hammered and dressed, not sharp',
      'Filed, polished and waxed',
    ],
    form: null,
    pieces: 1,
    ...common,
    massesG,
    lines,
    rush: null,
    carriage: { minor: 5900, words: 'Insured carriage, adult signature' },
    currency: { studio: 'GBP', quoted: 'GBP', rate: 1, buffer: 0 },
    tax: { kind: 'standard', rate: demoRates.vatRate, shown: 'inclusive' },
    price: { kind: 'firm' },
    shownRange: null,
    outOfRangeReason: null,
    validityDays: demoRates.pricing.validityDays,
    dateRange: { earliestWeeks: 8, latestWeeks: 12 },
    termsVersion: 'terms-1',
    mark: 'Reed between two dots, year and code, on the tang',
  };
}

/** Palstaves from the studio's pattern with an altered mark, TB90, sand, most of them hafted, sent abroad in euros. */
export function palstaves(pieces = 6, hafted = 4): QuoteDraft {
  const common = fromRates('TB90', 'compact');
  const massesG = { finished: 460, cast: 500, poured: 800 };
  const haft = { per: 'piece', onPieces: hafted } as const;
  const hafting = [
    cost('hand', 'haft', 'Hafting', { bench: 75 }, haft),
    cost('sundries', 'haft-wood', 'Ash haft and binding', { materials: 2200 }, haft),
  ];
  const lines = [
    cost('before-gate', 'intake', 'Intake and drawing check', { desk: 60 }),
    cost('before-gate', 'pattern', 'Pattern altered, match plate', { bench: 150, materials: 600 }),
    cost('before-gate', 'gate-a', 'Gate A: photos and answers', { desk: 30 }),
    cost('after-gate', 'record', 'Certificate, mark, record', { desk: 15 }, { per: 'piece' }),
    cost('attempt', 'mould', 'Sand mould and gating', { bench: 36, materials: 240 }),
    cost('attempt', 'break-out', 'Break-out, cut-off, first look', { bench: 24 }),
    ...metalLines(massesG, common.metal, heatMinor(demoRates), demoRates.planningLoadG),
    cost('hand', 'fettle', 'Fettling', { bench: 96 }, { ...repeating, lostWhenLate: true }),
    cost('hand', 'edge', 'Edge hardening', { bench: 48 }, repeating),
    cost('hand', 'finish', 'Filing, polishing and wax', { bench: 60 }, repeating),
    cost('sundries', 'abrasives', 'Abrasives and wax', { materials: 350 }, { per: 'piece' }),
    ...(hafted > 0 ? hafting : []),
  ];
  return {
    ...swordFromFile(),
    title: `${pieces} palstaves, side loop`,
    specification: ['Tin bronze, 90/10', 'Edges hammered and dressed, not sharp', `${hafted} with ash hafts`],
    form: 'palstave',
    pieces,
    ...common,
    massesG,
    lines,
    carriage: { minor: 6200, words: 'Insured carriage to the European Union' },
    currency: { studio: 'GBP', quoted: 'EUR', rate: 1.17, buffer: 0.02 },
    tax: { kind: 'export', rate: demoRates.vatRate, shown: 'exclusive' },
    dateRange: { earliestWeeks: 8, latestWeeks: 12 },
    mark: 'Altered: a reed between two dots, year and code, under the stop',
  };
}
