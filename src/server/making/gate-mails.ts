import { currencySchema } from '../../commission/money';
import type { CommissionRow } from '../commissions';
import type { Transaction } from '../db/client';
import type { gates } from '../db/schema/making';
import type { StagePayment } from '../money/ledger';
import { ownerAddresses } from '../people/owners';
import { queueMail } from '../outbox';
import type { Services } from '../services';

interface GatePhoto {
  id: string;
  caption: string;
  alt: string;
}

/** Queues M15: come and look. Nothing is approved by the mail itself. */
export async function queueGateMail(
  tx: Transaction,
  commission: CommissionRow,
  gate: { gate: 'A' | 'B' | 'C'; round: number; photos: GatePhoto[]; at: Date },
): Promise<void> {
  await queueMail(tx, {
    letter: 'M15',
    to: commission.email,
    cause: `M15:${commission.id}:${gate.gate}:${gate.round}`,
    commissionId: commission.id,
    at: gate.at,
    data: {
      ref: commission.ref,
      title: commission.title,
      name: commission.customerName,
      gate: gate.gate,
      round: gate.round,
      pictures: gate.photos.slice(0, 6).map((photo) => ({ photoId: photo.id, caption: photo.caption, alt: photo.alt })),
    },
  });
}

/** Queues M16 to both sides: which pictures were approved, and the payment that falls due by it. */
export async function queueGateDecidedMail(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  gate: typeof gates.$inferSelect,
  stage: StagePayment | null,
  at: Date,
): Promise<void> {
  const nextPayment = stage
    ? {
        label: stage.label,
        when: 'now that the pattern is approved',
        amount: { minor: stage.grossMinor, currency: currencySchema.parse(stage.currency) },
      }
    : undefined;
  const facts = {
    ref: commission.ref,
    title: commission.title,
    gate: 'A' as const,
    photoSetSha256: gate.photoSetSha256,
    photos: Math.max(1, gate.photoIds.length),
    approvedAt: at.toISOString(),
    ...(nextPayment ? { nextPayment } : {}),
  };
  const cause = `M16:${gate.id}`;
  await queueMail(tx, {
    letter: 'M16',
    to: commission.email,
    cause,
    commissionId: commission.id,
    at,
    data: { ...facts, reader: 'customer', name: commission.customerName },
  });
  for (const owner of await ownerAddresses(tx)) {
    await queueMail(tx, {
      letter: 'M16',
      to: owner.email,
      cause: `${cause}:${owner.email}`,
      commissionId: commission.id,
      at,
      data: { ...facts, reader: 'owner', name: owner.name },
    });
  }
}
