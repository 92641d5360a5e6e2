import { and, eq, sum } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import type { z } from 'zod';
import type { DealState } from '../../commission/deal';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { withinSentence } from '../../commission/sentence';
import type { MinutesDone, timerSchema } from '../../commission/making/work-done';
import { findCommission, lockCommission } from '../commissions';
import type { Db } from '../db/client';
import { minutesLog, timers } from '../db/schema/making';
import { recordEvent } from '../history';
import { startMaking } from './making';
import { IN_WORK } from './making-rules';
import { readPieces } from './pieces';
import type { Services } from '../services';

/** States of the deal in which somebody may be working on it: packing and a last look come after it is finished. */
const TIMED: readonly DealState[] = [...IN_WORK, 'finished'];
const NO_TIME = 'Time is logged only while a commission is at the bench. Ask the owner to take it up again first.';

/** Minutes logged on one operation of a commission so far. */
export interface MinutesTotal {
  operation: string;
  minutes: number;
}

/** Logs minutes worked. The same client id twice is one entry; an entry is never changed, a wrong one is answered by another. */
export async function logMinutes(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: MinutesDone,
): Promise<Outcome<MinutesTotal>> {
  const found = await findCommission(services, actor, ref, 'bench:work');
  if (!found.ok) return found;
  const now = services.now();
  return services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, found.value.id);
    const [known] = await tx.select().from(minutesLog).where(eq(minutesLog.clientId, input.clientId));
    if (known)
      return done({ operation: known.operation, minutes: await minutesOn(tx, known.commissionId, known.operation) });
    if (!TIMED.includes(commission.deal)) return refuse('conflict', NO_TIME);
    const piece = (await readPieces(tx, commission.id)).find((each) => each.number === input.piece);
    if (input.piece && !piece) return refuse('not-found', 'This commission has no piece of that number.');
    const written = await tx
      .insert(minutesLog)
      .values({
        id: uuidv7(),
        clientId: input.clientId,
        commissionId: commission.id,
        pieceId: piece?.id ?? null,
        operation: input.operation,
        minutes: input.minutes,
        by: actor!.id,
        at: now,
      })
      .onConflictDoNothing({ target: minutesLog.clientId })
      .returning({ id: minutesLog.id });
    if (written.length > 0) {
      await startMaking(services, tx, commission, actor);
      await recordEvent(tx, {
        commissionId: commission.id,
        code: 'minutes',
        actor,
        sentence: `${input.minutes} min logged on ${withinSentence(input.operation)}.`,
        at: now,
        data: { minutes: input.minutes, operation: input.operation, clientId: input.clientId },
      });
    }
    return done({ operation: input.operation, minutes: await minutesOn(tx, commission.id, input.operation) });
  });
}

/** Sum of the minutes logged on one operation. */
export async function minutesOn(db: Db, commissionId: string, operation: string): Promise<number> {
  const [row] = await db
    .select({ total: sum(minutesLog.minutes) })
    .from(minutesLog)
    .where(and(eq(minutesLog.commissionId, commissionId), eq(minutesLog.operation, operation)));
  return Number(row?.total ?? 0);
}

/** Starts or stops the actor's timer on a commission; stopping logs the minutes, rounded up, under the timer's own id. */
export async function turnTimer(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: z.output<typeof timerSchema>,
): Promise<Outcome<{ running: boolean; minutes: number }>> {
  const found = await findCommission(services, actor, ref, 'bench:work');
  if (!found.ok) return found;
  const now = services.now();
  const mine = and(eq(timers.commissionId, found.value.id), eq(timers.by, actor!.id));
  if (input.action === 'start') {
    if (!TIMED.includes(found.value.deal)) return refuse('conflict', NO_TIME);
    await services.db
      .insert(timers)
      .values({ id: uuidv7(), commissionId: found.value.id, by: actor!.id, operation: input.operation, startedAt: now })
      .onConflictDoNothing();
    return done({ running: true, minutes: 0 });
  }
  const [timer] = await services.db.select().from(timers).where(mine);
  if (!timer) return done({ running: false, minutes: 0 });
  const minutes = Math.max(1, Math.ceil((now.getTime() - timer.startedAt.getTime()) / 60_000));
  if (minutes > 720) {
    await services.db.delete(timers).where(eq(timers.id, timer.id));
    return refuse(
      'conflict',
      'This timer ran for more than 12 hours, so it was forgotten and not logged. Enter the minutes you worked.',
    );
  }
  const logged = await logMinutes(services, actor, ref, { clientId: timer.id, operation: timer.operation, minutes });
  await services.db.delete(timers).where(eq(timers.id, timer.id));
  if (!logged.ok) return logged;
  return done({ running: false, minutes });
}
