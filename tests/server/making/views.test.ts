// The specification, capability 40: a maker cannot fetch prices, addresses or surnames. Capability 11: one customer page.
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { commissions } from '../../../src/server/db/schema/commissions';
import { photos } from '../../../src/server/db/schema/making';
import { listBench, readBench } from '../../../src/server/making/bench-view';
import { watchCommission } from '../../../src/server/live';
import { findPhoto } from '../../../src/server/making/photos';
import { readCustomerMaking } from '../../../src/server/views/customer-making';
import { codeOf, commission, newEnquiry } from '../deal/deal-setting';
import { answerGate, booked, bring, mailsOf, must, photograph, pieceOf, press, scrap } from '../../factories/bench';
import { balance, ledgerOf, openPayingStudio, type PayingStudio } from '../../factories/paying-studio';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

const dayWords = (day: string) => `on ${day}`;
const shown = async (ref: string) => readCustomerMaking(studio.services.db, await commission(studio, ref), dayWords);

describe('the bench page', () => {
  it('tells a maker what to make, and no surname, address, price or payment', async () => {
    const ref = await booked(studio, undefined, { name: 'Isolde Wintermere', phone: '01632 960 188', budget: '3100' });
    const shipping = { lines: ['7 Quayside Stairs', 'Ostrey'], country: 'United Kingdom', phone: '01632 960 188' };
    await studio.services.db.update(commissions).set({ shipping }).where(eq(commissions.ref, ref));
    await bring(studio, ref, 'poured');
    await photograph(studio, ref, 'sound');
    const page = await readBench(studio.services, studio.maker, ref);
    if (!page.ok) throw new Error(page.problem.message);
    expect(page.value).toMatchObject({
      ref,
      for: 'Isolde',
      gateA: 'approved',
      pieces: [{ number: 1, stage: 'poured', next: 'sound', targetMassG: 720, toleranceG: 36 }],
    });
    const list = await listBench(studio.services, studio.maker);
    const text = JSON.stringify([page.value, list]);
    const { agreedMinor, stages } = await balance(studio, ref);
    const secrets = ['Wintermere', 'isolde@example.org', 'Quayside', 'Ostrey', '960 188', '3100', 'GBP', '£'];
    const amounts = [agreedMinor, ...stages.map((stage) => stage.grossMinor)].flatMap((minor) => [
      `${minor}`,
      `${minor / 100}`,
    ]);
    for (const secret of [...secrets, ...amounts]) expect(text, secret).not.toContain(secret);
    expect(text).not.toMatch(/minor|price|amount|ledger|receipt|rate|margin|soundness|email|phone|customerId/i);
  });

  it('is not the customer’s nor the bookkeeper’s, and has nothing before the first payment', async () => {
    const ref = await booked(studio);
    for (const actor of [studio.customer, studio.bookkeeper, null]) {
      expect(codeOf(await readBench(studio.services, actor, ref))).not.toBe('ok');
      expect(codeOf(await listBench(studio.services, actor))).not.toBe('ok');
    }
    const asked = await newEnquiry(studio);
    expect(await readBench(studio.services, studio.maker, asked)).toMatchObject({ problem: { code: 'not-found' } });
  });

  it('shows the maker which changes the customer asks for', async () => {
    const ref = await booked(studio);
    await photograph(studio, ref, 'pattern');
    must(await press(studio, ref, 'pattern'));
    must(await answerGate(studio, ref, 'changes', { note: 'The ribs are too low.' }));
    expect(await readBench(studio.services, studio.maker, ref)).toMatchObject({
      value: { gateA: 'changes', changesAsked: 'The ribs are too low.' },
    });
  });
});

describe('the customer’s page', () => {
  it('shows the runner, shared photos only, the failed pour in plain words, and the receipts', async () => {
    const ref = await booked(studio);
    expect((await shown(ref)).runner.map((step) => [step.name, step.state])).toEqual([
      ['Pattern', 'hot'],
      ['Mould', 'ahead'],
      ['Pour', 'ahead'],
      ['Finishing', 'ahead'],
      ['Inspection', 'ahead'],
      ['Dispatch', 'ahead'],
    ]);
    await bring(studio, ref, 'poured');
    const hidden = await photograph(studio, ref, 'poured', { caption: 'For ourselves' });
    await studio.services.db.update(photos).set({ shared: false }).where(eq(photos.id, hidden));
    const photo = await photograph(studio, ref, 'sound', { caption: 'The tip is missing' });
    must(await scrap(studio, ref, { photo }));
    const making = await shown(ref);
    expect(JSON.stringify(making)).not.toContain('For ourselves');
    expect(making.news.find((news) => news.key.startsWith('scrap:'))).toMatchObject({
      title: 'A pour failed: misrun',
      text: expect.stringContaining('Nothing changes in your price'),
      photos: [{ id: photo }],
    });
    expect(making.receipts.map((receipt) => receipt.receiptNo).sort()).toEqual(
      (await ledgerOf(studio, ref)).map((entry) => entry.receiptNo!),
    );
    expect(making.runner[0]).toMatchObject({ state: 'done', note: expect.stringContaining('You approved it on ') });
    expect(making.runner[1]!.state).toBe('hot');
    await bring(studio, ref, 'sound');
    expect((await shown(ref)).runner[2]!.note).toMatch(/^Sound, after 1 re-pour on /);
  });

  it('shows the gate with the pictures it binds to', async () => {
    const ref = await booked(studio);
    const first = await photograph(studio, ref, 'pattern');
    must(await press(studio, ref, 'pattern'));
    const second = await photograph(studio, ref, 'pattern');
    const { gate } = await shown(ref);
    expect(gate).toMatchObject({ state: 'open', photos: [{ id: first }, { id: second }] });
  });

  it('hears of each photo and each step at once, and of nothing on other commissions', async () => {
    const [ref, another] = [await booked(studio), await booked(studio)];
    const { id } = await commission(studio, ref);
    let calls = 0;
    let heard = () => {};
    const next = () => new Promise<void>((resolve) => (heard = resolve));
    const stop = await watchCommission(studio.services, id, () => {
      calls += 1;
      heard();
    });
    await photograph(studio, another, 'pattern');
    const news = next();
    await photograph(studio, ref, 'pattern');
    await news;
    expect(calls).toBe(1);
    const more = next();
    must(await press(studio, ref, 'pattern'));
    await more;
    stop();
    const heardBefore = calls;
    await photograph(studio, ref, 'pattern');
    expect(calls).toBe(heardBefore);
  });

  it('hears again after its connection to the database broke', async () => {
    const ref = await booked(studio);
    const { id } = await commission(studio, ref);
    let heard = () => {};
    const next = () => new Promise<void>((resolve) => (heard = resolve));
    const woken = next();
    const stop = await watchCommission(studio.services, id, () => heard());
    await studio.services.pool.query(
      `select pg_terminate_backend(pid) from pg_stat_activity where datname = current_database() and query = 'listen commission'`,
    );
    await woken;
    const news = next();
    await photograph(studio, ref, 'pattern');
    await news;
    stop();
    const away = {
      ...studio.services,
      config: { ...studio.services.config, databaseUrl: 'postgresql://127.0.0.1:1/none' },
    };
    await expect(watchCommission(away, id, () => {})).rejects.toThrow();
  });
});

describe('a photo', () => {
  it('is seen by its customer when it is shared, by makers and owners always, and by nobody else', async () => {
    const { services, customer, other, maker, owner, bookkeeper } = studio;
    const ref = await booked(studio);
    const id = await photograph(studio, ref, 'pattern');
    for (const actor of [customer, maker, owner])
      expect(codeOf(await findPhoto(services, actor, id, 'thumb'))).toBe('ok');
    for (const actor of [other, bookkeeper, null]) {
      expect(codeOf(await findPhoto(services, actor, id, 'thumb'))).toBe('not-found');
    }
    for (const size of ['huge', 'constructor', '', undefined]) {
      expect(codeOf(await findPhoto(services, owner, id, size))).toBe('not-found');
    }
    for (const wrong of ['x', '-'.repeat(36), undefined]) {
      expect(codeOf(await findPhoto(services, owner, wrong, 'thumb'))).toBe('not-found');
    }
    await services.db.update(photos).set({ shared: false }).where(eq(photos.id, id));
    expect(codeOf(await findPhoto(services, customer, id, 'thumb'))).toBe('not-found');
    expect(codeOf(await findPhoto(services, maker, id, 'thumb'))).toBe('ok');
  });

  it('with a clock far off is put where it arrived, and belongs to the only piece and its casting', async () => {
    const ref = await booked(studio);
    await bring(studio, ref, 'mould');
    const id = await photograph(studio, ref, 'poured');
    const [row] = await studio.services.db.select().from(photos).where(eq(photos.id, id));
    expect(row).toMatchObject({ pieceId: (await pieceOf(studio, ref)).id, attemptId: expect.any(String) });
    expect(row!.takenAt).toEqual(studio.clock.now);
    expect(await mailsOf(studio, ref, 'M19')).toHaveLength(1);
  });
});
