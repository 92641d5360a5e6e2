// The specification, section 2: T14 to T16, T19 to T22, T27, T30 to T33. The route is read from the agreed quote.
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { costLine } from '../../../src/commission/pricing/cost-lines';
import { events } from '../../../src/server/db/schema/commissions';
import { stagePayments } from '../../../src/server/db/schema/quotes';
import { finishCommission, recordDelivery } from '../../../src/server/making/finishing';
import { codeOf, commission, letters } from '../deal/deal-setting';
import {
  answerGate,
  attemptsOf,
  booked,
  bring,
  dispatch,
  mailsOf,
  must,
  photograph,
  pieceOf,
  press,
  toMould,
  toPacked,
  withoutGate,
} from '../../factories/bench';
import {
  balance,
  countOf,
  historyOf,
  openPayingStudio,
  payDue,
  type PayingStudio,
} from '../../factories/paying-studio';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

const DAY = 24 * 60 * 60_000;

async function sentences(ref: string): Promise<string[]> {
  const { id } = await commission(studio, ref);
  const rows = await studio.services.db.select().from(events).where(eq(events.commissionId, id)).orderBy(events.id);
  return rows.map((row) => row.sentence);
}

describe('a piece from its booking to its door', () => {
  it('goes through every stage of its quote, and each step leaves its line, its mail and its money', async () => {
    const ref = await booked(studio);
    const { route } = await pieceOf(studio, ref);
    expect(route[0]).toBe('pattern');
    await toMould(studio, ref);
    expect((await commission(studio, ref)).deal).toBe('making');
    expect((await letters(studio, ref)).filter((letter) => /^M1[456]/.test(letter))).toEqual([
      'M14 to isolde@example.org',
      'M15 to isolde@example.org',
      'M16 to isolde@example.org',
      'M16 to wren@example.org',
    ]);
    await toPacked(studio, ref);
    expect(codeOf(await dispatch(studio, ref))).toBe('ok');
    expect((await commission(studio, ref)).dispatch).toMatchObject({
      carrier: 'Estuary Parcels',
      adultSignature: true,
      parcel: expect.any(String),
    });
    expect(codeOf(await recordDelivery(studio.services, studio.customer, ref))).toBe('ok');
    expect((await commission(studio, ref)).deal).toBe('delivered');
    const history = await historyOf(studio, ref);
    expect(history.filter((code) => code.startsWith('stage-'))).toEqual(route.map((stage) => `stage-${stage}`));
    expect(history.filter((code) => /^T(1[2-9]|3)/.test(code))).toEqual([
      'T12',
      'T14',
      'T15',
      'T16',
      'T31',
      'T32',
      'T33',
    ]);
    const told = (await mailsOf(studio, ref, 'M19')).map((mail) => (mail.data as { stage: string }).stage);
    expect(told).toEqual(route.filter((stage) => !['pattern', 'inspected', 'packed'].includes(stage)));
    expect(countOf(await letters(studio, ref), 'M12')).toBe((await balance(studio, ref)).stages.length);
    for (const letter of ['M23', 'M24', 'M26']) expect(countOf(await letters(studio, ref), letter), letter).toBe(1);
    expect(await balance(studio, ref)).toMatchObject({ toComeMinor: 0, dueMinor: 0, overdueMinor: 0 });
  });

  it('names the piece in its history only when there are several', async () => {
    const one = await booked(studio);
    await bring(studio, one, 'poured');
    expect(await sentences(one)).toEqual(expect.arrayContaining(['Pattern ready.', 'Mould ready.', 'Poured.']));
    const several = await booked(studio, (draft) => ({ ...draft, pieces: 2 }), { pieces: 2 });
    await bring(studio, several, 'poured', 2);
    expect(await sentences(several)).toEqual(
      expect.arrayContaining(['Pattern ready.', 'Mould ready: piece 2.', 'Poured: piece 2.']),
    );
  });

  it('without gate A starts at the mould, and what would fall due at the gate falls due with the booking', async () => {
    const ref = await booked(studio, withoutGate);
    const { route, stage } = await pieceOf(studio, ref);
    expect(stage).toBe('waiting');
    expect(route[0]).toBe('mould');
    const second = (await balance(studio, ref)).stages[1]!;
    expect(second.dueAt).toEqual(new Date(studio.clock.now.getTime() + 7 * DAY));
    expect(await press(studio, ref, 'mould')).toMatchObject({ problem: { code: 'conflict' } });
    await payDue(studio, ref);
    await toPacked(studio, ref);
    expect(codeOf(await dispatch(studio, ref))).toBe('ok');
    const history = await historyOf(studio, ref);
    expect(countOf(history, 'T15')).toBe(0);
    expect(countOf(await letters(studio, ref), 'M15')).toBe(0);
    expect(countOf(await letters(studio, ref), 'M14')).toBe(1);
  });

  it('keeps mould, heat and masses with its attempt, and what was measured with the piece', async () => {
    const ref = await booked(studio);
    await toMould(studio, ref);
    must(await press(studio, ref, 'mould'));
    must(await press(studio, ref, 'poured', { heatNo: 'H-27-04', massG: 1_590 }));
    must(await press(studio, ref, 'sound', { massG: 884 }));
    expect(await attemptsOf(studio, ref)).toMatchObject([
      {
        number: 1,
        mouldNo: `${ref}/1`,
        heatNo: 'H-27-04',
        pouredMassG: 1_590,
        castMassG: 884,
        result: 'sound',
        family: 'thin',
        closedAt: studio.clock.now,
      },
    ]);
    await bring(studio, ref, 'finished');
    await photograph(studio, ref, 'inspected');
    const target = (await pieceOf(studio, ref)).targetMassG!;
    must(await press(studio, ref, 'inspected', { massG: target, balanceMm: 142 }));
    expect((await pieceOf(studio, ref)).measured).toEqual({ massG: target, balanceMm: 142 });
    must(await finishCommission(studio.services, studio.maker, ref));
    const [mail] = await mailsOf(studio, ref, 'M23');
    expect(mail!.data).toMatchObject({
      measured: [{ piece: 1, massG: target, balanceMm: 142 }],
      balance: { dueBy: new Date(studio.clock.now.getTime() + 14 * DAY).toISOString().slice(0, 10) },
    });
  });
});

describe('several pieces', () => {
  it('share one pattern and one gate, and M19 comes when all have reached a stage, not before', async () => {
    const ref = await booked(studio, (draft) => ({ ...draft, pieces: 3 }), { pieces: 3 });
    await photograph(studio, ref, 'pattern');
    must(await press(studio, ref, 'pattern', { piece: 2 }));
    for (const number of [1, 2, 3]) expect((await pieceOf(studio, ref, number)).stage).toBe('pattern');
    expect(await press(studio, ref, 'pattern', { piece: 3, from: 'waiting' })).toMatchObject({ ok: true });
    must(await answerGate(studio, ref, 'approve'));
    await payDue(studio, ref);
    expect(countOf(await historyOf(studio, ref), 'T15')).toBe(1);
    for (const number of [1, 2]) must(await press(studio, ref, 'mould', { piece: number }));
    must(await press(studio, ref, 'poured', { piece: 1 }));
    expect(await mailsOf(studio, ref, 'M19')).toEqual([]);
    must(await press(studio, ref, 'mould', { piece: 3 }));
    expect(await mailsOf(studio, ref, 'M19')).toMatchObject([
      { data: { stage: 'mould', pieces: 3, reached: 3, next: 'poured' } },
    ]);
    for (const number of [2, 3]) must(await press(studio, ref, 'poured', { piece: number }));
    expect((await mailsOf(studio, ref, 'M19')).map((mail) => (mail.data as { stage: string }).stage)).toEqual([
      'mould',
      'poured',
    ]);
  });

  it('some of them hafted: those without a haft go from their last work to inspection', async () => {
    const ref = await booked(
      studio,
      (draft) => ({
        ...draft,
        pieces: 3,
        outOfRangeReason: 'Two of them are hafted.',
        lines: [
          ...draft.lines,
          costLine({ id: 'haft', label: 'Hafting', group: 'hand', minutes: 75, rateMinorPerHour: 3_800, onPieces: 2 }),
        ],
      }),
      { pieces: 3 },
    );
    expect((await pieceOf(studio, ref, 2)).route).toContain('hafted');
    expect((await pieceOf(studio, ref, 3)).route).not.toContain('hafted');
    await toPacked(studio, ref);
    const hafted = (await mailsOf(studio, ref, 'M19')).find(
      (mail) => (mail.data as { stage: string }).stage === 'hafted',
    );
    expect(hafted!.data).toMatchObject({ pieces: 2, reached: 2 });
  });

  it('are finished only when the last has passed inspection', async () => {
    const ref = await booked(studio, (draft) => ({ ...draft, pieces: 2 }), { pieces: 2 });
    await bring(studio, ref, 'inspected', 1);
    expect(await finishCommission(studio.services, studio.owner, ref)).toMatchObject({
      problem: { code: 'conflict', message: expect.stringContaining('1 of 2 pieces') },
    });
    await bring(studio, ref, 'inspected', 2);
    const pressed = await Promise.all(
      Array.from({ length: 20 }, () => finishCommission(studio.services, studio.owner, ref)),
    );
    expect(pressed.map(codeOf)).toEqual(Array(20).fill('ok'));
    expect(countOf(await historyOf(studio, ref), 'T31')).toBe(1);
    expect(await mailsOf(studio, ref, 'M23')).toHaveLength(1);
  });
});

it('a stage that nobody was asked to pay at a gate is asked for when the piece is finished', async () => {
  const ref = await booked(studio, withoutGate);
  const { db } = studio.services;
  const { id } = await commission(studio, ref);
  await db.update(stagePayments).set({ dueAt: null }).where(eq(stagePayments.commissionId, id));
  expect((await pieceOf(studio, ref)).stage).toBe('waiting');
  await bring(studio, ref, 'inspected');
  must(await finishCommission(studio.services, studio.owner, ref));
  expect((await balance(studio, ref)).stages.map((stage) => stage.state)).toEqual(['paid', 'due', 'due']);
});
