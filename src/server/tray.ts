import { and, desc, eq, isNull } from 'drizzle-orm';
import { z } from 'zod';
import { may, type Actor } from '../commission/permissions';
import { done, refuse, type Outcome } from '../commission/problem';
import { commissions, tray } from './db/schema/commissions';
import { recordEvent } from './history';
import type { Services } from './services';

/** Something that did not fit and waits for the owner. */
export interface TrayItem {
  id: string;
  ref: string | null;
  /** Whose commission it is about, with a telephone number when one was ever given. */
  customer: { name: string; phone: string | null } | null;
  message: string;
  data: Record<string, unknown>;
  createdAt: string;
}

const FOR_OWNER = 'The tray is for the owner.';

/** Everything in the tray that is not settled, newest first. */
export async function readTray(services: Services, actor: Actor): Promise<Outcome<TrayItem[]>> {
  if (!may(actor, 'payment:record')) return refuse(actor ? 'not-allowed' : 'sign-in-needed', FOR_OWNER);
  const rows = await services.db
    .select({
      item: tray,
      ref: commissions.ref,
      name: commissions.customerName,
      phone: commissions.phone,
      shipping: commissions.shipping,
    })
    .from(tray)
    .leftJoin(commissions, eq(commissions.id, tray.commissionId))
    .where(isNull(tray.settledAt))
    .orderBy(desc(tray.createdAt));
  return done(
    rows.map(({ item, ref, name, phone, shipping }) => ({
      id: item.id,
      ref,
      customer: name === null ? null : { name, phone: phone ?? shipping?.phone ?? null },
      message: item.problem.message,
      data: item.data as Record<string, unknown>,
      createdAt: item.createdAt.toISOString(),
    })),
  );
}

/** Marks one item as dealt with; the row stays. A second press changes nothing. */
export async function settleTrayItem(
  services: Services,
  actor: Actor,
  id: string | undefined,
): Promise<Outcome<{ settled: boolean }>> {
  if (!may(actor, 'payment:record')) return refuse(actor ? 'not-allowed' : 'sign-in-needed', FOR_OWNER);
  if (!id || !z.uuid().safeParse(id).success) return refuse('not-found', 'There is no such item in the tray.');
  const at = services.now();
  return services.db.transaction(async (tx) => {
    const [row] = await tx
      .update(tray)
      .set({ settledAt: at, settledBy: actor!.id })
      .where(and(eq(tray.id, id), isNull(tray.settledAt)))
      .returning({ commissionId: tray.commissionId });
    if (row?.commissionId) {
      const sentence = 'What did not fit was dealt with.';
      const data = { item: id };
      await recordEvent(tx, { commissionId: row.commissionId, code: 'tray-settled', actor, sentence, at, data });
    }
    return done({ settled: row !== undefined });
  });
}
