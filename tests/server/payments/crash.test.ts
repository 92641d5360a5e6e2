// Reliability plan row 8 and section 6: killed between payment and booking, the redelivered event books once.
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { pieces } from '../../../src/server/db/schema/making';
import { stripeEvents } from '../../../src/server/db/schema/quotes';
import { reconcileCheckouts } from '../../../src/server/money/reconcile';
import { commission, letters } from '../deal/deal-setting';
import {
  countOf,
  historyOf,
  ledgerOf,
  openPayingStudio,
  paidUnseen,
  post,
  type PayingStudio,
} from '../../factories/paying-studio';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

/** Gives the event to a server of its own process that is killed at `point`; the signal it ended by. */
async function killedAt(point: string, event: string): Promise<NodeJS.Signals | null> {
  const { databaseUrl } = studio.services.config;
  const port = new URL(studio.stripeUrl).port;
  const script = 'tests/server/payments/dying-server.ts';
  const child = spawn(process.execPath, ['--import', 'tsx', script, databaseUrl, port, event, point], {
    stdio: ['ignore', 'ignore', 'inherit'],
  });
  const [, signal] = (await once(child, 'exit')) as [number | null, NodeJS.Signals | null];
  return signal;
}

const seen = async (id: string) => studio.services.db.select().from(stripeEvents).where(eq(stripeEvents.id, id));

async function expectBookedOnce(ref: string) {
  const row = await commission(studio, ref);
  expect(row.deal).toBe('booked');
  expect(await ledgerOf(studio, ref)).toHaveLength(1);
  expect(countOf(await historyOf(studio, ref), 'T12')).toBe(1);
  expect(countOf(await letters(studio, ref), 'M12')).toBe(1);
  const wanted = await studio.services.db.select().from(pieces).where(eq(pieces.commissionId, row.id));
  expect(wanted).toHaveLength(row.pieces);
}

it.each(['asked', 'written'])(
  'killed at “%s”, nothing is half written, and the event sent again books once',
  async (point) => {
    const { ref, completed } = await paidUnseen(studio);
    const { id } = JSON.parse(completed.body) as { id: string };
    expect(await killedAt(point, completed.body)).toBe('SIGKILL');
    expect(await seen(id)).toEqual([]);
    expect(await ledgerOf(studio, ref)).toEqual([]);
    expect((await commission(studio, ref)).deal).toBe('agreed');
    expect((await post(studio, completed)).body.outcome).toBe('booked');
    await expectBookedOnce(ref);
  },
  60_000,
);

it('killed after the booking and before its answer, the event sent again is known', async () => {
  const { ref, completed } = await paidUnseen(studio);
  expect(await killedAt('committed', completed.body)).toBe('SIGKILL');
  await expectBookedOnce(ref);
  expect((await post(studio, completed)).body.outcome).toBe('known');
  await expectBookedOnce(ref);
}, 60_000);

it('killed and never told again, the payment is found by the next look', async () => {
  const { ref, completed } = await paidUnseen(studio);
  expect(await killedAt('written', completed.body)).toBe('SIGKILL');
  studio.clock.now = new Date(studio.clock.now.getTime() + 120_000);
  await reconcileCheckouts(studio.services);
  await expectBookedOnce(ref);
}, 60_000);
