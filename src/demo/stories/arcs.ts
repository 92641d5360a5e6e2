import type { PieceStage } from '../../commission/making/making';
import type { QuoteDraft } from '../../commission/pricing/quote-draft';
import { approveGate, photo, reach, type Shot, type StepFacts, work, workBeforeGate } from '../acts/bench';
import { accept, address, enquire, quote, type SentFile } from '../acts/deal';
import { pay } from '../acts/money';
import { ago, type Moment, pourDay } from '../clock';
import { type Step, step } from '../world';

/** How a commission came to be booked. Days are counted back from today. */
export interface Booking {
  customer: string;
  signed: string;
  asked: Parameters<typeof enquire>[3];
  files?: SentFile[];
  days: { enquiry: number; quote: number; accept: number; paid: number };
  draft?: (draft: QuoteDraft) => QuoteDraft;
  to?: { lines: string[]; country?: string };
}

/** From the enquiry to the first stage payment. */
export function booked(ref: string, booking: Booking): Step[] {
  const { customer, signed, asked, files, days, draft, to } = booking;
  return [
    step(ago(days.enquiry, '19:42'), (world) => enquire(world, ref, customer, asked, files)),
    step(ago(days.quote, '20:15'), (world) => quote(world, ref, draft)),
    step(ago(days.accept, '18:31'), async (world) => {
      await accept(world, ref, customer, signed);
      if (to) await address(world, ref, to.lines, to.country);
    }),
    step(ago(days.paid, '08:52'), (world) => pay(world, ref, 'acceptance')),
  ];
}

/** The pattern made, photographed and shown to the customer. */
export function patternShown(ref: string, at: { started: Moment; shown: Moment }, shots: Shot[]): Step[] {
  return [
    step(at.started, (world) => workBeforeGate(world, ref, 'pell')),
    step(at.shown, async (world) => {
      for (const shot of shots) await photo(world, ref, 'pell', shot);
      await reach(world, ref, 'pell', 'pattern');
    }),
  ];
}

/** The customer approves and, where a second stage was agreed, pays it two days later. */
export function patternApproved(ref: string, customer: string, at: { approved: number; paid?: number }): Step[] {
  const approve = step(ago(at.approved, '20:06'), (world) => approveGate(world, ref, customer));
  const paid = at.paid;
  return paid === undefined ? [approve] : [approve, step(ago(paid, '12:20'), (world) => pay(world, ref, 'gate-a'))];
}

/** Moulds two days before the pour day, the pour, and the break-out the next morning. */
export function cast(
  ref: string,
  pour: number,
  facts: { heatNo: string; pouredG: number; castG: number; shots?: Partial<Record<PieceStage, Shot[]>> },
): Step[] {
  const show = async (world: Parameters<Step['run']>[0], who: string, stage: PieceStage) => {
    for (const shot of facts.shots?.[stage] ?? []) await photo(world, ref, who, shot);
  };
  return [
    step(pourDay(pour, -2, '15:20'), async (world) => {
      await show(world, 'juno', 'mould');
      await reach(world, ref, 'juno', 'mould');
    }),
    step(pourDay(pour, 0, '14:05'), async (world) => {
      await show(world, 'juno', 'poured');
      await reach(world, ref, 'juno', 'poured', { heatNo: facts.heatNo, massG: facts.pouredG });
    }),
    step(pourDay(pour, 1, '09:35'), async (world) => {
      await show(world, 'juno', 'sound');
      await reach(world, ref, 'juno', 'sound', { massG: (piece) => facts.castG + ((piece * 7) % 5) - 2 });
    }),
  ];
}

/** Hand work from fettling to the last stage before inspection, from three to seven days after the pour day. */
export function workedUp(ref: string, pour: number, ratio: number, shots: Shot[] = []): Step[] {
  const stages: [PieceStage, number, string][] = [
    ['fettled', 3, '16:10'],
    ['hardened', 4, '11:30'],
    ['finished', 6, '15:45'],
    ['patinated', 6, '17:20'],
    ['hafted', 7, '12:15'],
  ];
  return stages.map(([stage, plus, time]) =>
    step(pourDay(pour, plus, time), async (world) => {
      for (const shot of shots.filter((each) => each.stage === stage)) await photo(world, ref, 'davit', shot);
      await reach(world, ref, 'davit', stage, { ratio });
    }),
  );
}

/** Weighed, measured and photographed; passes inspection. */
export function inspected(ref: string, at: Moment, facts: StepFacts, shots: Shot[]): Step {
  return step(at, async (world) => {
    for (const shot of shots) await photo(world, ref, 'davit', shot);
    await work(world, ref, 'wren', 'Inspection', 25);
    await reach(world, ref, 'wren', 'inspected', facts);
  });
}
