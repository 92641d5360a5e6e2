import { createHash } from 'node:crypto';
import { and, asc, desc, eq, gt, inArray } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { z } from 'zod';
import { ENDED_STATES } from '../../commission/deal';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { findCommission, lockCommission, type CommissionRow } from '../commissions';
import type { Db, Transaction } from '../db/client';
import { gates, photos, pieces } from '../db/schema/making';
import { queueGateMail, queueGateDecidedMail } from './gate-mails';
import { recordEvent } from '../history';
import { acceptedStages, callInStages } from '../money/ledger';
import type { Services } from '../services';

export type GateRow = typeof gates.$inferSelect;

/** The customer's answer at a gate; `photoSet` is the hash of the pictures they were shown. */
export const gateDecisionSchema = z.object({
  photoSet: z.string().regex(/^[0-9a-f]{64}$/, 'Reload the page, so that you answer on the pictures you see.'),
  decision: z.enum(['approve', 'changes'], 'Choose: approve, or ask for changes.'),
  note: z.string().trim().max(2000).optional(),
});
export type GateDecision = z.output<typeof gateDecisionSchema>;

/** SHA-256 over the photos' own hashes in their order: what an approval binds to. */
export function photoSetHash(hashes: readonly string[]): string {
  return createHash('sha256').update(hashes.join('\n')).digest('hex');
}

/** T15: opens gate A on the pattern photos taken so far and asks the customer to look. */
export async function openGateA(
  tx: Transaction,
  commission: CommissionRow,
  by: { actor: Actor; now: Date },
): Promise<void> {
  const last = await latestGate(tx, commission.id, 'A');
  if (last && last.state !== 'changes') return;
  const shown = await patternPhotos(tx, commission.id, last);
  const round = (last?.round ?? 0) + 1;
  const photoSetSha256 = photoSetHash(shown.map((photo) => photo.sha256));
  await tx.insert(gates).values({
    id: uuidv7(),
    commissionId: commission.id,
    gate: 'A',
    round,
    photoSetSha256,
    photoIds: shown.map((photo) => photo.id),
    openedAt: by.now,
  });
  await recordEvent(tx, {
    commissionId: commission.id,
    code: 'T15',
    actor: by.actor,
    sentence: 'The pattern is ready to look at.',
    public: true,
    at: by.now,
    data: { photoSetSha256 },
  });
  await queueGateMail(tx, commission, { gate: 'A', round, photos: shown, at: by.now });
}

/** The pattern's shared photos, oldest first: those taken since changes were asked for, when they were. */
export async function patternPhotos(tx: Transaction, commissionId: string, last: GateRow | null) {
  const since = last?.state === 'changes' ? last.decidedAt : null;
  return tx
    .select({ id: photos.id, sha256: photos.sha256, caption: photos.caption, alt: photos.alt })
    .from(photos)
    .where(
      and(
        eq(photos.commissionId, commissionId),
        eq(photos.stage, 'pattern'),
        eq(photos.shared, true),
        since ? gt(photos.createdAt, since) : undefined,
      ),
    )
    .orderBy(asc(photos.takenAt), asc(photos.id));
}

/** A photo of the pattern added while the customer is asked joins what they look at; an answer on the older set is stale. */
export async function addToOpenGate(tx: Transaction, commissionId: string, photoId: string): Promise<void> {
  const gate = await latestGate(tx, commissionId, 'A');
  if (gate?.state !== 'open') return;
  const photoIds = [...gate.photoIds, photoId];
  const rows = await tx
    .select({ id: photos.id, sha256: photos.sha256 })
    .from(photos)
    .where(inArray(photos.id, photoIds));
  const hashes = photoIds.flatMap((id) => rows.find((row) => row.id === id)?.sha256 ?? []);
  await tx
    .update(gates)
    .set({ photoIds, photoSetSha256: photoSetHash(hashes) })
    .where(eq(gates.id, gate.id));
}

/** The newest round of a gate, if it was ever opened. */
export async function latestGate(db: Db, commissionId: string, gate: string): Promise<GateRow | null> {
  const [row] = await db
    .select()
    .from(gates)
    .where(and(eq(gates.commissionId, commissionId), eq(gates.gate, gate)))
    .orderBy(desc(gates.round))
    .limit(1);
  return row ?? null;
}

/** T16 and T17: the customer approves the very pictures they saw, or asks for changes. Silence decides nothing. */
export async function decideGate(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: GateDecision,
): Promise<Outcome<{ state: string }>> {
  const found = await findCommission(services, actor, ref, 'gate:decide');
  if (!found.ok) return found;
  if (input.decision === 'changes' && !input.note) {
    return refuse('invalid', 'Write down what should be different, so that the maker need not guess.', {
      note: 'Say what should be different.',
    });
  }
  const now = services.now();
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    if (ENDED_STATES.has(commission.deal))
      return refuse(
        'conflict',
        `This commission is ${commission.deal}, so there is nothing to decide. Write to us to take it up.`,
      );
    const gate = await latestGate(tx, commission.id, 'A');
    if (!gate) return refuse('conflict', 'There is nothing to look at yet. We write to you when there is.');
    if (gate.photoSetSha256 !== input.photoSet)
      return refuse('stale', 'The pictures have changed since you opened the page. Please look again.');
    const state = input.decision === 'approve' ? 'approved' : 'changes';
    if (gate.state !== 'open') {
      return gate.state === state && (state === 'approved' || gate.note === (input.note ?? null))
        ? done({ state })
        : refuse('conflict', 'This was answered already. Write us a message if you have changed your mind.');
    }
    await tx
      .update(gates)
      .set({ state, decidedAt: now, decidedBy: actor!.id, note: input.note ?? null })
      .where(eq(gates.id, gate.id));
    await recordEvent(tx, {
      commissionId: commission.id,
      code: state === 'approved' ? 'T16' : 'T17',
      actor,
      sentence:
        state === 'approved' ? 'The pattern was approved.' : `Changes to the pattern were asked for: ${input.note}`,
      public: true,
      at: now,
      data: { photoSetSha256: gate.photoSetSha256, round: gate.round },
    });
    if (state === 'approved') await afterApproval(services, tx, commission, gate, now);
    else await backToPattern(tx, commission, now);
    return done({ state });
  });
}

async function afterApproval(
  services: Services,
  tx: Transaction,
  commission: CommissionRow,
  gate: GateRow,
  now: Date,
): Promise<void> {
  await callInStages(tx, commission.id, ['gate-a'], now);
  const stage = (await acceptedStages(tx, commission.id)).find((each) => each.trigger === 'gate-a');
  await queueGateDecidedMail(services, tx, commission, gate, stage ?? null, now);
}

async function backToPattern(tx: Transaction, commission: CommissionRow, now: Date): Promise<void> {
  await tx
    .update(pieces)
    .set({ stage: 'waiting', updatedAt: now })
    .where(and(eq(pieces.commissionId, commission.id), eq(pieces.stage, 'pattern')));
}
