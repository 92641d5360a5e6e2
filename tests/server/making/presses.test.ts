// The specification, capability 28; reliability plan row 15: one winner in every race, and a repeat answers as the first did.
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Outcome } from '../../../src/commission/problem';
import { minutesSchema } from '../../../src/commission/making/work-done';
import { commissions } from '../../../src/server/db/schema/commissions';
import { minutesLog, timers } from '../../../src/server/db/schema/making';
import { decideGate, latestGate } from '../../../src/server/making/gates';
import { logMinutes, minutesOn, turnTimer } from '../../../src/server/making/minutes';
import { codeOf, commission } from '../deal/deal-setting';
import {
  answerGate,
  attemptsOf,
  booked,
  bring,
  entryId,
  mailsOf,
  must,
  photograph,
  pieceOf,
  press,
  scrap,
  toMould,
} from '../../factories/bench';
import { countOf, historyOf, openPayingStudio, type PayingStudio } from '../../factories/paying-studio';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

const twenty = <T>(work: (each: number) => Promise<T>) =>
  Promise.all(Array.from({ length: 20 }, (_, each) => work(each)));

describe('a stage', () => {
  it('pressed twenty times at once, each press its own entry, is one line, one mail and one attempt', async () => {
    const ref = await booked(studio);
    await toMould(studio, ref);
    const pressed = await twenty(() => press(studio, ref, 'mould', { from: 'pattern' }));
    for (const outcome of pressed) expect(outcome).toEqual({ ok: true, value: { piece: 1, stage: 'mould' } });
    expect(countOf(await historyOf(studio, ref), 'stage-mould')).toBe(1);
    expect(await mailsOf(studio, ref, 'M19')).toHaveLength(1);
    expect(await attemptsOf(studio, ref)).toHaveLength(1);
  });

  it('whose sending is repeated after the work went on is answered as the first time', async () => {
    const ref = await booked(studio);
    await bring(studio, ref, 'mould');
    const clientId = entryId();
    const first = await press(studio, ref, 'poured', { clientId });
    must(await press(studio, ref, 'sound'));
    expect(await press(studio, ref, 'poured', { clientId, from: 'mould' })).toEqual(first);
    expect((await pieceOf(studio, ref)).stage).toBe('sound');
    expect(countOf(await historyOf(studio, ref), 'stage-poured')).toBe(1);
  });

  it('pressed first by twenty at once starts the making once', async () => {
    const ref = await booked(studio);
    await photograph(studio, ref, 'pattern');
    await twenty<Outcome<unknown>>((each) =>
      each % 2
        ? press(studio, ref, 'pattern', { from: 'waiting' })
        : logMinutes(studio.services, studio.maker, ref, { clientId: entryId(), operation: 'Pattern', minutes: 5 }),
    );
    expect(countOf(await historyOf(studio, ref), 'T14')).toBe(1);
    expect(countOf(await historyOf(studio, ref), 'T15')).toBe(1);
    expect([await mailsOf(studio, ref, 'M14'), await mailsOf(studio, ref, 'M15')].map((list) => list.length)).toEqual([
      1, 1,
    ]);
  });
});

describe('gate A', () => {
  async function shown() {
    const ref = await booked(studio);
    await photograph(studio, ref, 'pattern');
    must(await press(studio, ref, 'pattern'));
    return ref;
  }
  const gateOf = async (ref: string) => (await mailsOf(studio, ref, 'M16')).length;

  it('approved twenty times at once is approved once', async () => {
    const ref = await shown();
    const answers = await twenty(() => answerGate(studio, ref, 'approve'));
    for (const answer of answers) expect(answer).toEqual({ ok: true, value: { state: 'approved' } });
    expect(countOf(await historyOf(studio, ref), 'T16')).toBe(1);
    expect(await gateOf(ref)).toBe(2);
  });

  it('approved and sent back at once ends in one of the two', async () => {
    for (let round = 0; round < 10; round += 1) {
      const ref = await shown();
      const [approved, changes] = await Promise.all([
        answerGate(studio, ref, 'approve'),
        answerGate(studio, ref, 'changes', { note: 'A longer tang, please.' }),
      ]);
      expect([approved.ok, changes.ok].filter(Boolean)).toHaveLength(1);
      const history = await historyOf(studio, ref);
      expect([countOf(history, 'T16'), countOf(history, 'T17')]).toEqual(approved.ok ? [1, 0] : [0, 1]);
    }
  });

  it('is answered on the pictures that were seen: one added since makes the answer stale', async () => {
    const ref = await shown();
    const before = (await mailsOf(studio, ref, 'M15')).length;
    const { services, customer } = studio;
    const seen = await currentSet(ref);
    await photograph(studio, ref, 'pattern', { caption: 'The mark on the tang' });
    const now = await currentSet(ref);
    expect(now).not.toBe(seen);
    for (const photoSet of [seen, '0'.repeat(64)]) {
      expect(await decideGate(services, customer, ref, { photoSet, decision: 'approve' })).toMatchObject({
        problem: { code: 'stale', message: expect.stringContaining('look again') },
      });
    }
    expect(codeOf(await decideGate(services, customer, ref, { photoSet: now, decision: 'approve' }))).toBe('ok');
    await photograph(studio, ref, 'pattern', { caption: 'One more, after the approval' });
    expect(await currentSet(ref)).toBe(now);
    expect((await mailsOf(studio, ref, 'M15')).length).toBe(before);
  });

  it('sent back needs words, goes back to the maker, and shows only what was taken since', async () => {
    const ref = await shown();
    expect(await answerGate(studio, ref, 'changes')).toMatchObject({
      problem: { code: 'invalid', fields: { note: expect.any(String) } },
    });
    must(await answerGate(studio, ref, 'changes', { note: 'The ribs are too low.' }));
    expect(codeOf(await answerGate(studio, ref, 'changes', { note: 'The ribs are too low.' }))).toBe('ok');
    // A second, different wish is not dropped in silence.
    expect(codeOf(await answerGate(studio, ref, 'changes', { note: 'And a wider blade.' }))).toBe('conflict');
    expect((await pieceOf(studio, ref)).stage).toBe('waiting');
    expect(await press(studio, ref, 'pattern')).toMatchObject({
      problem: { code: 'conflict', message: expect.stringContaining('changed pattern') },
    });
    studio.clock.now = new Date(studio.clock.now.getTime() + 60_000);
    const fresh = await photograph(studio, ref, 'pattern');
    must(await press(studio, ref, 'pattern'));
    const [, second] = await mailsOf(studio, ref, 'M15');
    expect(second!.data).toMatchObject({ round: 2, pictures: [{ photoId: fresh }] });
    must(await answerGate(studio, ref, 'approve'));
    expect((await historyOf(studio, ref)).filter((code) => /^T1[5-7]$/.test(code))).toEqual([
      'T15',
      'T17',
      'T15',
      'T16',
    ]);
  });

  it('is the customer’s alone', async () => {
    const ref = await shown();
    for (const by of [studio.other, studio.maker, studio.owner, studio.bookkeeper]) {
      expect(codeOf(await answerGate(studio, ref, 'approve', { by })), by.email).not.toBe('ok');
    }
    expect(countOf(await historyOf(studio, ref), 'T16')).toBe(0);
  });

  async function currentSet(ref: string): Promise<string> {
    return (await latestGate(studio.services.db, (await commission(studio, ref)).id, 'A'))!.photoSetSha256;
  }
});

describe('minutes', () => {
  const log = (ref: string, more: Record<string, unknown> = {}, by = studio.maker) =>
    logMinutes(
      studio.services,
      by,
      ref,
      minutesSchema.parse({ clientId: entryId(), operation: 'Fettling', minutes: 30, ...more }),
    );
  const rows = async (ref: string) => {
    const { id } = await commission(studio, ref);
    return studio.services.db.select().from(minutesLog).where(eq(minutesLog.commissionId, id));
  };

  it('sent twenty times under one id are one entry, also after the commission has left the bench', async () => {
    const ref = await booked(studio);
    const clientId = entryId();
    const outcomes = await twenty(() => log(ref, { clientId }));
    for (const outcome of outcomes)
      expect(outcome).toEqual({ ok: true, value: { operation: 'Fettling', minutes: 30 } });
    expect(await rows(ref)).toHaveLength(1);
    expect(countOf(await historyOf(studio, ref), 'minutes')).toBe(1);
    await studio.services.db.update(commissions).set({ deal: 'sent' }).where(eq(commissions.ref, ref));
    expect(codeOf(await log(ref, { clientId }))).toBe('ok');
    expect(codeOf(await log(ref))).toBe('conflict');
  });

  it('add up by operation, belong to a piece that exists, and are the bench’s', async () => {
    const ref = await booked(studio);
    must(await log(ref, { minutes: 15, piece: 1 }));
    expect(await log(ref, { minutes: 45 })).toMatchObject({ value: { minutes: 60 } });
    expect(await minutesOn(studio.services.db, (await commission(studio, ref)).id, 'Fettling')).toBe(60);
    expect(codeOf(await log(ref, { piece: 2 }))).toBe('not-found');
    for (const by of [studio.customer, studio.bookkeeper]) expect(codeOf(await log(ref, {}, by))).not.toBe('ok');
    for (const minutes of [0, -5, 1.5, 721, 'long']) {
      expect(minutesSchema.safeParse({ clientId: entryId(), operation: 'x', minutes }).success, String(minutes)).toBe(
        false,
      );
    }
  });

  it('by the clock: started twice it runs once, stopped twenty times it is logged once', async () => {
    const ref = await booked(studio);
    const turn = (action: 'start' | 'stop') =>
      turnTimer(studio.services, studio.maker, ref, { action, operation: 'Moulding' });
    await twenty(() => turn('start'));
    const { id } = await commission(studio, ref);
    expect(await studio.services.db.select().from(timers).where(eq(timers.commissionId, id))).toHaveLength(1);
    studio.clock.now = new Date(studio.clock.now.getTime() + 61_000);
    await twenty(() => turn('stop'));
    expect(await rows(ref)).toMatchObject([{ minutes: 2, operation: 'Moulding' }]);
    expect(await turn('stop')).toEqual({ ok: true, value: { running: false, minutes: 0 } });
  });

  it('by a clock that was forgotten are not logged, which is said', async () => {
    const ref = await booked(studio);
    const turn = (action: 'start' | 'stop') =>
      turnTimer(studio.services, studio.maker, ref, { action, operation: 'Moulding' });
    must(await turn('start'));
    studio.clock.now = new Date(studio.clock.now.getTime() + 721 * 60_000);
    expect(await turn('stop')).toMatchObject({
      problem: { code: 'conflict', message: expect.stringContaining('forgotten') },
    });
    expect(await rows(ref)).toEqual([]);
    expect(await turn('stop')).toMatchObject({ ok: true });
  });
});

it('a casting scrapped twenty times at once is scrapped once', async () => {
  const ref = await booked(studio);
  await bring(studio, ref, 'poured');
  const clientId = entryId();
  const pressed = await twenty((each) => scrap(studio, ref, { from: 'poured', ...(each < 10 ? { clientId } : {}) }));
  expect(pressed.filter((outcome) => outcome.ok).length).toBeGreaterThan(0);
  for (const outcome of pressed.filter((each) => !each.ok)) expect(codeOf(outcome)).toBe('stale');
  expect(countOf(await historyOf(studio, ref), 'T23')).toBe(1);
  expect(await mailsOf(studio, ref, 'M20')).toHaveLength(1);
  expect(await attemptsOf(studio, ref)).toMatchObject([{ result: 'scrapped' }]);
});
