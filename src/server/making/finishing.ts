import { eq } from 'drizzle-orm';
import { currencySchema } from '../../commission/money';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import type { Dispatch } from '../../commission/making/work-done';
import { findCommission, lockCommission, type CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import { commissions } from '../db/schema/commissions';
import { moveDeal, timesMoved } from '../history';
import { callInStages, readBalance } from '../money/ledger';
import { newestPictures } from './making-mails';
import { queueMail } from '../outbox';
import { readPieces, type PieceRow } from './pieces';
import { acceptedDraft } from '../quote/promise';
import { dayAfter } from '../quote/promised-days';
import type { Services } from '../services';

const LOOK_DAYS = 14;

/** T31: every piece has passed inspection; the balance falls due and the customer sees the final photos. */
export async function finishCommission(
  services: Services,
  actor: Actor,
  ref: string | undefined,
): Promise<Outcome<{ deal: string }>> {
  const found = await findCommission(services, actor, ref, 'bench:work');
  if (!found.ok) return found;
  const now = services.now();
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    if (commission.deal === 'finished') return done({ deal: 'finished' });
    const all = await readPieces(tx, commission.id);
    const open = all.filter((piece) => piece.stage !== 'inspected' && piece.stage !== 'packed');
    if (open.length > 0 || all.length === 0) {
      return refuse(
        'conflict',
        all.length === 1
          ? 'The piece has to pass inspection before the customer is told that it is finished.'
          : `${open.length} of ${all.length} pieces still have to pass inspection before the customer is told.`,
      );
    }
    const before = await timesMoved(tx, commission.id, 'T31');
    const moved = await moveDeal(tx, commission, {
      move: 'T31',
      mover: actor?.role === 'owner' ? 'owner' : 'maker',
      actor,
      sentence:
        all.length === 1
          ? 'The piece is finished and inspected.'
          : `All ${all.length} pieces are finished and inspected.`,
      public: true,
      at: now,
    });
    if (!moved.ok) return moved;
    await callInStages(tx, commission.id, ['gate-a', 'before-dispatch', 'rework'], now);
    await queueFinishedMail(services, tx, commission, all, before);
    return done({ deal: moved.value });
  });
}

async function queueFinishedMail(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  all: PieceRow[],
  before: { times: number; last: Date | null },
): Promise<void> {
  const now = services.now();
  const balance = await readBalance(tx, commission.id, now);
  const dueAt = balance.stages.findLast((stage) => stage.owedMinor > 0)?.dueAt;
  await queueMail(tx, {
    letter: 'M23',
    to: commission.email,
    cause: `M23:${commission.id}:${before.times + 1}`,
    commissionId: commission.id,
    at: now,
    data: {
      ref: commission.ref,
      title: commission.title,
      name: commission.customerName,
      pictures: await newestPictures(tx, commission.id, { stage: 'inspected', since: before.last }, 6),
      measured: all.flatMap((piece) =>
        piece.measured?.massG
          ? [
              {
                piece: piece.number,
                massG: piece.measured.massG,
                ...(piece.measured.balanceMm === undefined ? {} : { balanceMm: piece.measured.balanceMm }),
              },
            ]
          : [],
      ),
      ...(balance.dueMinor > 0 && dueAt
        ? {
            balance: {
              amount: { minor: balance.dueMinor, currency: currencySchema.parse(balance.currency) },
              dueBy: dayAfter(dueAt, 0),
            },
          }
        : {}),
      address: commission.shipping ? [...commission.shipping.lines, commission.shipping.country] : [],
    },
  });
}

/** T32: the parcel is with the carrier. Never with money owed, never a blade without an adult's signature. */
export async function dispatchCommission(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: Dispatch,
): Promise<Outcome<{ deal: string }>> {
  const found = await findCommission(services, actor, ref, 'dispatch:send');
  if (!found.ok) return found;
  const now = services.now();
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    if (commission.deal === 'sent') return done({ deal: 'sent' });
    const barred = await whyNotSend(tx, commission, input, now);
    if (barred) return barred;
    const moved = await moveDeal(tx, commission, {
      move: 'T32',
      mover: 'owner',
      actor,
      sentence: `Sent with ${input.carrier}, tracking ${input.tracking}.`,
      public: true,
      at: now,
    });
    if (!moved.ok) return moved;
    const dispatch = {
      carrier: input.carrier,
      tracking: input.tracking,
      sentAt: now.toISOString(),
      adultSignature: input.adultSignature,
      parcel: input.parcel,
      ...(input.duties ? { duties: input.duties } : {}),
    };
    await tx.update(commissions).set({ dispatch, updatedAt: now }).where(eq(commissions.id, commission.id));
    await queueMail(tx, {
      letter: 'M24',
      to: commission.email,
      cause: `M24:${commission.id}:${input.tracking}`,
      commissionId: commission.id,
      at: now,
      data: {
        ref: commission.ref,
        title: commission.title,
        name: commission.customerName,
        carrier: input.carrier,
        tracking: input.tracking,
        adultMustSign: input.adultSignature,
        parcel: input.parcel,
        ...(input.duties ? { duties: input.duties } : {}),
      },
    });
    return done({ deal: moved.value });
  });
}

async function whyNotSend(
  tx: Transaction,
  commission: CommissionRow,
  input: Dispatch,
  now: Date,
): Promise<Outcome<never> | null> {
  const all = await readPieces(tx, commission.id);
  const unpacked = all.filter((piece) => piece.stage !== 'packed').length;
  if (unpacked > 0)
    return refuse(
      'conflict',
      all.length === 1
        ? 'The piece is not packed yet. The bench marks it packed; then send it.'
        : `${unpacked} of ${all.length} pieces are not packed yet. The bench marks them packed; then send them.`,
    );
  const balance = await readBalance(tx, commission.id, now);
  if (balance.toComeMinor > 0)
    return refuse('conflict', 'Money is still owed on this commission, so the parcel stays here until it is received.');
  if (commission.bladed && !input.adultSignature) {
    return refuse(
      'invalid',
      'A bladed piece is handed only to an adult, who signs for it. Choose that service and tick the box.',
      {
        adultSignature: 'Needed for a bladed piece.',
      },
    );
  }
  return null;
}

/** T33: the parcel arrived; the customer gets the care note and some days to look it over. */
export async function recordDelivery(
  services: Services,
  actor: Actor,
  ref: string | undefined,
): Promise<Outcome<{ deal: string }>> {
  const found = await findCommission(services, actor, ref, 'commission:read');
  if (!found.ok) return found;
  const now = services.now();
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    if (commission.deal === 'delivered') return done({ deal: 'delivered' });
    const moved = await moveDeal(tx, commission, {
      move: 'T33',
      mover: actor?.role === 'owner' ? 'owner' : 'customer',
      actor,
      sentence: 'The parcel arrived.',
      public: true,
      at: now,
    });
    if (!moved.ok) return moved;
    await queueCareMail(tx, commission, now);
    return done({ deal: moved.value });
  });
}

async function queueCareMail(tx: Transaction, commission: CommissionRow, now: Date): Promise<void> {
  const all = await readPieces(tx, commission.id);
  const hafted = all.some((piece) => piece.route.includes('hafted'));
  const patinated = all.some((piece) => piece.route.includes('patinated'));
  const draft = await acceptedDraft(tx, commission.id);
  const polished =
    draft?.lines.some((line) => line.group === 'hand' && line.id.startsWith('finish') && line.minutes > 0) ?? true;
  await queueMail(tx, {
    letter: 'M26',
    to: commission.email,
    cause: `M26:${commission.id}:${(await timesMoved(tx, commission.id, 'T33')).times}`,
    commissionId: commission.id,
    at: now,
    data: {
      ref: commission.ref,
      title: commission.title,
      name: commission.customerName,
      finish: patinated ? 'patinated' : polished ? 'bright' : 'as-cast',
      hafted,
      bladed: commission.bladed,
      lookUntil: dayAfter(now, LOOK_DAYS),
    },
  });
}
