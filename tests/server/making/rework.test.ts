// the specification T46 to T48: a piece that came back is finished, inspected and sent a second time, and each is told anew.
import { eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { pieces } from '../../../src/server/db/schema/making';
import { stagePayments } from '../../../src/server/db/schema/quotes';
import { moveDeal } from '../../../src/server/history';
import { finishCommission, recordDelivery } from '../../../src/server/making/finishing';
import { acceptedStages } from '../../../src/server/money/ledger';
import { booked, dispatch, mailsOf, must, photograph, pieceOf, press, toPacked } from '../../factories/bench';
import { balance, openPayingStudio, payDue, type PayingStudio } from '../../factories/paying-studio';
import { codeOf, commission } from '../deal/deal-setting';

const DAY = 24 * 60 * 60_000;

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

const wait = (days: number) => {
  studio.clock.now = new Date(studio.clock.now.getTime() + days * DAY);
};

/** Delivered, then back at the bench before its finish, with a payment that waits for the rework to be done. */
async function cameBack(): Promise<string> {
  const { services, owner, customer } = studio;
  const ref = await booked(studio);
  await toPacked(studio, ref);
  must(await dispatch(studio, ref));
  must(await recordDelivery(services, customer, ref));
  wait(1);
  const said = { sentence: 'It came back.', at: services.now() };
  must(await moveDeal(services.db, await commission(studio, ref), { ...said, move: 'T46', mover: 'customer', actor: customer })); // prettier-ignore
  must(
    await moveDeal(services.db, await commission(studio, ref), { ...said, move: 'T47', mover: 'owner', actor: owner }),
  );
  const { id } = await commission(studio, ref);
  const stages = await acceptedStages(services.db, id);
  await services.db.insert(stagePayments).values({
    id: uuidv7(),
    commissionId: id,
    quoteId: stages[0]!.quoteId,
    position: stages.length + 1,
    label: 'Refinishing',
    trigger: 'rework',
    currency: 'GBP',
    netMinor: 11_100,
    taxMinor: 2220,
    grossMinor: 13_320,
    dueAt: null,
  });
  await services.db.update(pieces).set({ stage: 'hardened', measured: null }).where(eq(pieces.commissionId, id));
  return ref;
}

it('tells the second finish with its own photos and payment, and the second parcel and arrival too', async () => {
  const ref = await cameBack();
  wait(1);
  const { route, targetMassG } = await pieceOf(studio, ref);
  for (const stage of route.slice(route.indexOf('hardened') + 1, route.indexOf('inspected')))
    must(await press(studio, ref, stage));
  const inspect = () => press(studio, ref, 'inspected', { massG: targetMassG ?? 100 });
  // The photo of the first time is not one of the piece as it is now.
  expect(codeOf(await inspect())).toBe('conflict');
  await photograph(studio, ref, 'inspected', { caption: 'Refinished' });
  must(await inspect());
  must(await finishCommission(studio.services, studio.maker, ref));
  const finished = await mailsOf(studio, ref, 'M23');
  expect(finished).toHaveLength(2);
  const second = finished[1]!.data as { pictures: { caption: string }[]; balance: { amount: { minor: number } } };
  expect(second.pictures.map((picture) => picture.caption)).toEqual(['Refinished']);
  expect(second.balance.amount.minor).toBe(13_320);
  expect((await balance(studio, ref)).dueMinor).toBe(13_320);
  expect((await mailsOf(studio, ref, 'M19')).filter((mail) => (mail.data as { stage: string }).stage === 'finished')).toHaveLength(2); // prettier-ignore
  must(await finishCommission(studio.services, studio.maker, ref));
  expect(await mailsOf(studio, ref, 'M23')).toHaveLength(2);
  await payDue(studio, ref);
  must(await press(studio, ref, 'packed'));
  must(await dispatch(studio, ref, { tracking: 'EP 100 201' }));
  must(await recordDelivery(studio.services, studio.customer, ref));
  expect(await mailsOf(studio, ref, 'M26')).toHaveLength(2);
});
