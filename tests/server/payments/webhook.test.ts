// the specification T12 and capability 6; reliability plan row 1. Judge of shapes: the official SDK.
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { pieces } from '../../../src/server/db/schema/making';
import { checkoutSessions, stagePayments } from '../../../src/server/db/schema/quotes';
import { mails } from '../../../src/server/db/schema/studio';
import { reconcileSession } from '../../../src/server/money/payments';
import { commission, letters } from '../deal/deal-setting';
import {
  agreed,
  balance,
  bank,
  countOf,
  DECLINED,
  deliverAll,
  dueStage,
  historyOf,
  ledgerOf,
  openPage,
  openPayingStudio,
  paidUnseen,
  payAt,
  payDue,
  post,
  sessionsOf,
  type PayingStudio,
} from '../../factories/paying-studio';

let studio: PayingStudio;
beforeAll(async () => {
  studio = await openPayingStudio();
});
afterAll(() => studio.drop());

describe('a payment’s webhook', () => {
  it('books once, opens the pieces, dates the promise and writes M12, all from what Stripe says', async () => {
    const { ref, stage, completed } = await paidUnseen(studio);
    expect(await post(studio, completed)).toEqual({ status: 200, body: { received: true, outcome: 'booked' } });
    const row = await commission(studio, ref);
    const [entry] = await ledgerOf(studio, ref);
    expect(entry).toMatchObject({
      kind: 'received',
      amountMinor: stage.grossMinor,
      currency: 'GBP',
      stagePaymentId: stage.id,
      providerId: expect.stringMatching(/^pi_/),
      receiptNo: expect.any(Number),
    });
    expect(row.deal).toBe('booked');
    expect((await historyOf(studio, ref)).slice(-2)).toEqual(['payment-received', 'T12']);
    const wanted = await studio.services.db.select().from(pieces).where(eq(pieces.commissionId, row.id));
    expect(wanted).toHaveLength(row.pieces);
    expect(row.leavesFrom! < row.leavesTo!).toBe(true);
    const [mail] = await studio.services.db
      .select()
      .from(mails)
      .where(eq(mails.cause, `M12:${entry!.id}`));
    expect(mail).toMatchObject({
      letter: 'M12',
      to: 'isolde@example.org',
      data: {
        booked: true,
        receiptNo: entry!.receiptNo,
        amount: { minor: stage.grossMinor, currency: 'GBP' },
        leaves: { from: row.leavesFrom, to: row.leavesTo },
      },
    });
    expect(await balance(studio, ref)).toMatchObject({
      receivedMinor: stage.grossMinor,
      unmatchedMinor: 0,
      dueMinor: 0,
    });
  });

  it('twenty times in parallel is one entry, one booking and one M12', async () => {
    for (let round = 0; round < 3; round += 1) {
      const { ref, completed } = await paidUnseen(studio);
      const answers = await Promise.all(Array.from({ length: 20 }, () => post(studio, completed)));
      expect(answers.map((answer) => answer.status)).toEqual(Array(20).fill(200));
      expect(answers.filter((answer) => answer.body.outcome === 'booked')).toHaveLength(1);
      expect(await ledgerOf(studio, ref)).toHaveLength(1);
      expect(countOf(await historyOf(studio, ref), 'T12')).toBe(1);
      expect(countOf(await letters(studio, ref), 'M12')).toBe(1);
      const { id, pieces: wanted } = await commission(studio, ref);
      const rows = await studio.services.db.select().from(pieces).where(eq(pieces.commissionId, id));
      expect(rows).toHaveLength(wanted);
    }
  });

  it('that never comes is made up for by asking, also at the same moment as it comes late', async () => {
    const { ref, completed } = await paidUnseen(studio);
    const [session] = await sessionsOf(studio, ref);
    await Promise.all([
      ...Array.from({ length: 5 }, () => post(studio, completed)),
      ...Array.from({ length: 5 }, () => reconcileSession(studio.services, session!.id)),
    ]);
    expect(await ledgerOf(studio, ref)).toHaveLength(1);
    expect(countOf(await letters(studio, ref), 'M12')).toBe(1);
  });

  it('of a session whose row was lost books by what was written on the session', async () => {
    const { ref, stage, completed } = await paidUnseen(studio);
    const { id } = await commission(studio, ref);
    await studio.services.db.delete(checkoutSessions).where(eq(checkoutSessions.commissionId, id));
    await post(studio, completed);
    expect(await ledgerOf(studio, ref)).toMatchObject([{ stagePaymentId: stage.id, amountMinor: stage.grossMinor }]);
    expect(await sessionsOf(studio, ref)).toMatchObject([{ state: 'paid' }]);
  });

  it('of later stages books without moving the deal again', async () => {
    const ref = await agreed(studio);
    await payDue(studio, ref);
    const { id } = await commission(studio, ref);
    const [, second] = (await balance(studio, ref)).stages;
    await studio.services.db
      .update(stagePayments)
      .set({ dueAt: studio.clock.now })
      .where(eq(stagePayments.id, second!.id));
    await payDue(studio, ref);
    const history = await historyOf(studio, ref);
    expect([countOf(history, 'payment-received'), countOf(history, 'T12')]).toEqual([2, 1]);
    const [, mail] = await studio.services.db
      .select()
      .from(mails)
      .where(eq(mails.letter, 'M12'))
      .then((rows) => rows.filter((row) => row.commissionId === id));
    expect(mail!.data).toMatchObject({ booked: false, label: second!.label });
  });

  it('of a declined card changes nothing', async () => {
    const ref = await agreed(studio);
    await payAt(studio, (await openPage(studio, ref)).url, DECLINED);
    await deliverAll(studio);
    expect(await ledgerOf(studio, ref)).toEqual([]);
    expect((await dueStage(studio, ref)).state).toBe('due');
  });

  it('of a page that expired leaves the stage due, and a new page is made', async () => {
    const ref = await agreed(studio);
    const page = await openPage(studio, ref);
    await bank(studio, 'expire', page.sessionId);
    await deliverAll(studio);
    expect(await sessionsOf(studio, ref)).toMatchObject([{ state: 'expired' }]);
    expect((await openPage(studio, ref)).sessionId).not.toBe(page.sessionId);
    await payDue(studio, ref);
    expect((await commission(studio, ref)).deal).toBe('booked');
  });
});
