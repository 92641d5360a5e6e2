// the specification T23, T29, capabilities 1 and 7, and section 4.3 (mean of the beta posterior: alpha / (alpha + beta)).
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { SCRAP_CAUSES } from '../../../src/commission/making/making';
import { draftFromEstimate } from '../../../src/commission/pricing/estimate';
import { priceQuote } from '../../../src/commission/pricing/quote';
import { photos } from '../../../src/server/db/schema/making';
import { readPourRecord } from '../../../src/server/making/pour-record';
import { currentRateCard, currentRates } from '../../../src/server/pricing/rates';
import { codeOf, commission, enquiry } from '../deal/deal-setting';
import { attemptsOf, booked, bring, mailsOf, must, photograph, pieceOf, press, scrap } from '../../factories/bench';
import { balance, countOf, historyOf, openPayingStudio, type PayingStudio } from '../../factories/paying-studio';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

const thin = async () => (await currentRates(studio.services.db)).families.find((family) => family.code === 'thin')!;
const later = (minutes: number) => {
  studio.clock.now = new Date(studio.clock.now.getTime() + minutes * 60_000);
};

describe('a pour that fails', () => {
  it('closes its attempt with the cause, sends the piece back to the mould, and costs the customer nothing', async () => {
    later(1);
    const ref = await booked(studio);
    await bring(studio, ref, 'poured');
    const before = { row: await commission(studio, ref), money: await balance(studio, ref) };
    const photo = await photograph(studio, ref, 'sound', { caption: 'The tip is missing' });
    must(await scrap(studio, ref, { note: 'The last 40 mm are missing.', photo }));
    expect(await attemptsOf(studio, ref)).toMatchObject([
      { result: 'scrapped', cause: 'misrun', causeNote: 'The last 40 mm are missing.', foundAt: 'poured' },
    ]);
    expect(await pieceOf(studio, ref)).toMatchObject({ stage: 'pattern', measured: null });
    const after = await commission(studio, ref);
    expect(after.leavesFrom).toBe(before.row.leavesFrom);
    const weeks = (await currentRates(studio.services.db)).throughput.repourWeeks;
    const moved = (Date.parse(after.leavesTo!) - Date.parse(before.row.leavesTo!)) / (7 * 86_400_000);
    expect(moved).toBe(weeks);
    expect(await balance(studio, ref)).toEqual(before.money);
    const [mail] = await mailsOf(studio, ref, 'M20');
    expect(mail!.data).toMatchObject({
      cause: 'misrun',
      note: 'The last 40 mm are missing.',
      picture: { photoId: photo, caption: 'The tip is missing' },
      leaves: { from: after.leavesFrom, to: after.leavesTo },
      outerMoved: true,
    });
    expect(await studio.services.db.select().from(photos).where(eq(photos.id, photo))).toMatchObject([
      { attemptId: (await attemptsOf(studio, ref))[0]!.id },
    ]);
  });

  it('counts as one failure of its family and nothing else, and a new estimate of the family costs more', async () => {
    later(1);
    const { services } = studio;
    const wish = enquiry();
    const priced = async () => {
      const card = await currentRateCard(services);
      const draft = draftFromEstimate(wish, card);
      if (!draft.ok) throw new Error('the estimate was refused');
      return priceQuote(draft.value);
    };
    const ref = await booked(studio);
    await bring(studio, ref, 'poured');
    const [before, firm] = [await thin(), await priced()];
    must(await scrap(studio, ref, { cause: 'cold-shut' }));
    const [after, dearer] = [await thin(), await priced()];
    expect([after.sound - before.sound, after.failed - before.failed]).toEqual([0, 1]);
    // The specification, 4.3 and 4.7: p0 0.75 worth four pours, so alpha = 3 + sound and beta = 1 + failed; 14 and 6 give 17 and 7.
    const mean = ({ sound, failed }: typeof before) => (3 + sound) / (4 + sound + failed);
    expect(firm.soundPour.mean).toBeCloseTo(mean(before), 12);
    expect(dearer.soundPour.mean).toBeCloseTo(mean(after), 12);
    expect(dearer.cost.expected).toBeGreaterThan(firm.cost.expected);
    expect(dearer.prices.firmMinor).toBeGreaterThanOrEqual(firm.prices.firmMinor);
  });

  it('that came out sound is a success only while it stays one', async () => {
    later(1);
    const ref = await booked(studio);
    await bring(studio, ref, 'poured');
    const before = await thin();
    must(await press(studio, ref, 'sound'));
    const sound = await thin();
    expect([sound.sound - before.sound, sound.failed - before.failed]).toEqual([1, 0]);
    must(await press(studio, ref, 'fettled'));
    later(1);
    must(await scrap(studio, ref, { cause: 'porosity' }));
    const after = await thin();
    expect([after.sound - before.sound, after.failed - before.failed]).toEqual([0, 1]);
    expect(await attemptsOf(studio, ref)).toMatchObject([{ result: 'scrapped', foundAt: 'fettled' }]);
  });
});

describe('the second attempt', () => {
  it('has its own number and mould, tells its own stages, and shows none of the failed casting’s pictures', async () => {
    later(1);
    const ref = await booked(studio);
    await bring(studio, ref, 'poured');
    await photograph(studio, ref, 'sound', { caption: 'The misrun' });
    must(await scrap(studio, ref));
    must(await press(studio, ref, 'mould'));
    must(await press(studio, ref, 'poured'));
    const fresh = await photograph(studio, ref, 'sound', { caption: 'Whole' });
    must(await press(studio, ref, 'sound'));
    expect((await attemptsOf(studio, ref)).map((each) => [each.number, each.mouldNo, each.result])).toEqual([
      [1, `${ref}/1`, 'scrapped'],
      [2, `${ref}/2`, 'sound'],
    ]);
    const told = await mailsOf(studio, ref, 'M19');
    const stages = told.map((mail) => (mail.data as { stage: string }).stage);
    expect(stages).toEqual(['mould', 'poured', 'mould', 'poured', 'sound']);
    expect(told.at(-1)!.data).toMatchObject({ pictures: [{ photoId: fresh }] });
    expect(countOf(await historyOf(studio, ref), 'T15')).toBe(1);
  });

  it('that fails as well is told again, with the promise moved again', async () => {
    later(1);
    const ref = await booked(studio);
    await bring(studio, ref, 'poured');
    const first = (await commission(studio, ref)).leavesTo!;
    must(await scrap(studio, ref));
    await bring(studio, ref, 'poured');
    must(await scrap(studio, ref, { cause: 'blow' }));
    expect((await mailsOf(studio, ref, 'M20')).map((mail) => (mail.data as { cause: string }).cause)).toEqual([
      'misrun',
      'blow',
    ]);
    const weeks = (await currentRates(studio.services.db)).throughput.repourWeeks;
    expect((Date.parse((await commission(studio, ref)).leavesTo!) - Date.parse(first)) / (7 * 86_400_000)).toBe(
      2 * weeks,
    );
  });

  it('of one of several pieces leaves the others where they are', async () => {
    later(1);
    const ref = await booked(studio, (draft) => ({ ...draft, pieces: 2 }), { pieces: 2 });
    await bring(studio, ref, 'fettled', 1);
    await bring(studio, ref, 'poured', 2);
    must(await scrap(studio, ref, { piece: 2 }));
    expect([(await pieceOf(studio, ref, 1)).stage, (await pieceOf(studio, ref, 2)).stage]).toEqual([
      'fettled',
      'pattern',
    ]);
    const [mail] = await mailsOf(studio, ref, 'M20');
    expect(mail!.data).toMatchObject({ piece: 2, pieces: 2 });
    await bring(studio, ref, 'fettled', 2);
    const told = (await mailsOf(studio, ref, 'M19')).map((each) => (each.data as { stage: string }).stage);
    expect(told).toEqual(['mould', 'poured', 'mould', 'poured', 'sound', 'fettled']);
  });
});

it('the owner reads what failed and how each family comes out; the maker and the customer do not', async () => {
  const { services, owner, maker, customer } = studio;
  const record = await readPourRecord(services, owner);
  if (!record.ok) throw new Error(record.problem.message);
  const family = await thin();
  expect(record.value.families.find((each) => each.code === 'thin')).toMatchObject({
    sound: family.sound,
    failed: family.failed,
  });
  expect(record.value.scrapped.length).toBeGreaterThan(0);
  for (const { cause } of record.value.scrapped) expect(Object.keys(SCRAP_CAUSES)).toContain(cause);
  for (const actor of [maker, customer, null]) expect(codeOf(await readPourRecord(services, actor))).not.toBe('ok');
});
