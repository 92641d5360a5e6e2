// The specification, section 2, "Illegal moves that must be refused and tested", and the checks of T15, T19, T21, T23, T30 and T32.
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { eq } from 'drizzle-orm';
import { scrapSchema, stageDoneSchema } from '../../../src/commission/making/work-done';
import { commissions } from '../../../src/server/db/schema/commissions';
import { finishCommission, recordDelivery } from '../../../src/server/making/finishing';
import { codeOf, commission, type Person } from '../deal/deal-setting';
import {
  answerGate,
  booked,
  bring,
  dispatch,
  entryId,
  mailsOf,
  must,
  photograph,
  pieceOf,
  press,
  scrap,
  toMould,
  toPacked,
} from '../../factories/bench';
import { agreed, countOf, historyOf, openPayingStudio, payDue, type PayingStudio } from '../../factories/paying-studio';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

const refusal = (code: string, words: RegExp) => ({
  ok: false,
  problem: { code, message: expect.stringMatching(words) },
});

describe('a step is refused with a sentence', () => {
  it('before the first payment, and to those who do not work at the bench', async () => {
    const unpaid = await agreed(studio);
    expect(
      codeOf(await press(studio, unpaid, 'pattern', { from: 'waiting' }).catch(() => ({ ok: true as const }))),
    ).not.toBe('ok');
    const ref = await booked(studio);
    for (const by of [studio.customer, studio.other, studio.bookkeeper]) {
      expect(codeOf(await press(studio, ref, 'pattern', { by })), by.role).not.toBe('ok');
    }
    expect((await pieceOf(studio, ref)).stage).toBe('waiting');
  });

  it('the pattern without a photo', async () => {
    const ref = await booked(studio);
    expect(await press(studio, ref, 'pattern')).toMatchObject(refusal('conflict', /at least one photo of the pattern/));
    expect(await historyOf(studio, ref)).not.toContain('T14');
    expect(await mailsOf(studio, ref, 'M14')).toEqual([]);
  });

  it('a mould before the pattern is approved, whoever presses, and however long the customer is silent', async () => {
    const ref = await booked(studio);
    await photograph(studio, ref, 'pattern');
    must(await press(studio, ref, 'pattern'));
    const start = studio.clock.now;
    for (const days of [0, 22, 400]) {
      studio.clock.now = new Date(start.getTime() + days * 86_400_000);
      for (const by of [studio.maker, studio.owner]) {
        expect(await press(studio, ref, 'mould', { by })).toMatchObject(refusal('conflict', /has not approved/));
      }
    }
    studio.clock.now = start;
  });

  it('a mould while a stage is due and unpaid; the owner may let it through with a reason that is kept', async () => {
    const ref = await booked(studio);
    await photograph(studio, ref, 'pattern');
    must(await press(studio, ref, 'pattern'));
    must(await answerGate(studio, ref, 'approve'));
    expect(await press(studio, ref, 'mould', { note: 'please' })).toMatchObject(refusal('conflict', /Ask the owner/));
    expect(await press(studio, ref, 'mould', { by: studio.owner })).toMatchObject({
      problem: { code: 'invalid', fields: { note: expect.any(String) } },
    });
    must(await press(studio, ref, 'mould', { by: studio.owner, note: 'Paid by cheque, on its way.' }));
    expect((await historyOf(studio, ref)).at(-1)).toBe('stage-mould');
  });

  it('out of order: poured without a mould, sound without a pour, work on what is not broken out', async () => {
    const ref = await booked(studio);
    await toMould(studio, ref);
    for (const to of ['poured', 'sound', 'fettled', 'inspected', 'packed'] as const) {
      expect(await press(studio, ref, to), to).toMatchObject({ ok: false });
    }
    expect(await press(studio, ref, 'poured')).toMatchObject(refusal('stale', /next step is: mould ready/));
    must(await press(studio, ref, 'mould'));
    expect(await press(studio, ref, 'sound')).toMatchObject(refusal('stale', /next step is: poured/));
    expect((await pieceOf(studio, ref)).stage).toBe('mould');
  });

  it('a page that is behind', async () => {
    const ref = await booked(studio);
    await bring(studio, ref, 'sound');
    expect(await press(studio, ref, 'poured', { from: 'mould' })).toMatchObject(refusal('stale', /moved on/));
  });

  it('a piece the commission does not have, and a stage that is none', async () => {
    const ref = await booked(studio);
    await photograph(studio, ref, 'pattern');
    expect(codeOf(await press(studio, ref, 'pattern', { piece: 2, from: 'waiting' }))).toBe('not-found');
    const entry = { clientId: entryId(), piece: 1, from: 'waiting' };
    for (const to of ['', 'gilded', 'MOULD', null])
      expect(stageDoneSchema.safeParse({ ...entry, to }).success).toBe(false);
    for (const massG of [0, -1, 1.5, 50_001, 'heavy']) {
      expect(stageDoneSchema.safeParse({ ...entry, to: 'poured', massG }).success, String(massG)).toBe(false);
    }
  });

  it('inspection without a mass, without a photo, or out of tolerance without a note', async () => {
    const ref = await booked(studio);
    await bring(studio, ref, 'finished');
    const last = (await pieceOf(studio, ref)).route.at(-3)!;
    await bring(studio, ref, last);
    const { targetMassG, toleranceG } = await pieceOf(studio, ref);
    const most = targetMassG! + toleranceG!;
    expect(await press(studio, ref, 'inspected')).toMatchObject({
      problem: { code: 'invalid', message: expect.stringContaining('Weigh'), fields: { massG: expect.any(String) } },
    });
    expect(await press(studio, ref, 'inspected', { massG: most })).toMatchObject(
      refusal('conflict', /photo of the finished/),
    );
    await photograph(studio, ref, 'inspected');
    for (const massG of [most + 1, targetMassG! - toleranceG! - 1]) {
      expect(await press(studio, ref, 'inspected', { massG })).toMatchObject({
        problem: { code: 'invalid', fields: { massG: expect.any(String), note: expect.any(String) } },
      });
    }
    must(await press(studio, ref, 'inspected', { massG: most + 1, note: 'The customer wished for a heavier grip.' }));
    expect((await pieceOf(studio, ref)).measured).toMatchObject({ massG: most + 1, note: expect.any(String) });
  });

  it('packing before the customer was told, and work after it', async () => {
    const ref = await booked(studio);
    await bring(studio, ref, 'inspected');
    expect(await press(studio, ref, 'packed')).toMatchObject(refusal('conflict', /Tell the customer/));
    must(await finishCommission(studio.services, studio.maker, ref));
    expect(codeOf(await scrap(studio, ref))).toBe('conflict');
    must(await press(studio, ref, 'packed'));
    expect((await pieceOf(studio, ref)).stage).toBe('packed');
  });

  it.each(['held', 'cancelled', 'sent'] as const)('while the commission is %s', async (deal) => {
    const ref = await booked(studio);
    await bring(studio, ref, 'mould');
    await studio.services.db.update(commissions).set({ deal }).where(eq(commissions.ref, ref));
    expect(await press(studio, ref, 'poured')).toMatchObject(refusal('conflict', /not at the bench/));
    expect(codeOf(await scrap(studio, ref))).toBe('conflict');
  });
});

describe('scrapping is refused', () => {
  it('without a cause, and with one that is none', () => {
    const entry = { clientId: entryId(), piece: 1, from: 'poured' };
    for (const cause of [undefined, '', 'bad luck']) {
      const parsed = scrapSchema.safeParse({ ...entry, cause });
      expect(parsed.success ? [] : parsed.error.issues.map((issue) => issue.message)).toEqual([
        'Pick what went wrong; a casting is never scrapped without a cause.',
      ]);
    }
  });

  it('before anything was poured, from a page that is behind, and with the photo of another commission', async () => {
    const ref = await booked(studio);
    await bring(studio, ref, 'mould');
    expect(await scrap(studio, ref)).toMatchObject(refusal('conflict', /Nothing has been poured/));
    must(await press(studio, ref, 'poured'));
    expect(codeOf(await scrap(studio, ref, { from: 'sound' }))).toBe('stale');
    const another = await booked(studio);
    const theirs = await photograph(studio, another, 'waiting');
    expect(await scrap(studio, ref, { photo: theirs })).toMatchObject({
      problem: { code: 'invalid', fields: { photo: expect.any(String) } },
    });
    expect(await mailsOf(studio, ref, 'M20')).toEqual([]);
    expect((await pieceOf(studio, ref)).stage).toBe('poured');
  });
});

describe('sending is refused', () => {
  it('unpacked, with money owed, a blade without an adult’s signature, and to anybody but the owner', async () => {
    const ref = await booked(studio);
    await bring(studio, ref, 'inspected');
    expect(codeOf(await dispatch(studio, ref))).toBe('conflict');
    must(await finishCommission(studio.services, studio.maker, ref));
    expect(await dispatch(studio, ref)).toMatchObject(refusal('conflict', /not packed/));
    must(await press(studio, ref, 'packed'));
    expect(await dispatch(studio, ref)).toMatchObject(refusal('conflict', /Money is still owed/));
    await payDue(studio, ref);
    expect((await commission(studio, ref)).bladed).toBe(true);
    expect(await dispatch(studio, ref, { adultSignature: '' })).toMatchObject({
      problem: { code: 'invalid', fields: { adultSignature: expect.any(String) } },
    });
    const strangers: Person[] = [studio.maker, studio.customer, studio.bookkeeper];
    for (const by of strangers) expect(codeOf(await dispatch(studio, ref, {}, by)), by.role).not.toBe('ok');
    expect((await commission(studio, ref)).deal).toBe('finished');
  });

  it('twice: twenty presses at once are one parcel and one mail, and so is its arrival', async () => {
    const ref = await booked(studio);
    await toPacked(studio, ref);
    const sent = await Promise.all(Array.from({ length: 20 }, () => dispatch(studio, ref)));
    expect(sent.map(codeOf)).toEqual(Array(20).fill('ok'));
    const { services, customer, owner, other, maker } = studio;
    for (const actor of [other, maker]) expect(codeOf(await recordDelivery(services, actor, ref))).not.toBe('ok');
    const arrived = await Promise.all(
      Array.from({ length: 20 }, (_, each) => recordDelivery(services, each % 2 ? customer : owner, ref)),
    );
    expect(arrived.map(codeOf)).toEqual(Array(20).fill('ok'));
    const history = await historyOf(studio, ref);
    expect([countOf(history, 'T32'), countOf(history, 'T33')]).toEqual([1, 1]);
    expect([await mailsOf(studio, ref, 'M24'), await mailsOf(studio, ref, 'M26')].map((list) => list.length)).toEqual([
      1, 1,
    ]);
  });
});
