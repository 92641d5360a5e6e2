import { and, desc, eq } from 'drizzle-orm';
import type { Enquiry } from '../../commission/enquiry/enquiry';
import { DESIGN_SOURCES } from '../../commission/enquiry/enquiry-choices';
import type { Actor } from '../../commission/permissions';
import { done, type Outcome } from '../../commission/problem';
import { rightsSchema, type Rights } from '../../commission/enquiry/rights';
import { findCommission, type CommissionRow } from '../commissions';
import type { Db } from '../db/client';
import { events } from '../db/schema/commissions';
import { recordEvent } from '../history';
import type { Services } from '../services';

const CODE = 'rights';

/** Writes down what the studio found out about the rights in a design. The enquiry itself stays as it was sent. */
export async function recordRights(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: Rights,
): Promise<Outcome<Rights>> {
  const found = await findCommission(services, actor, ref, 'commission:triage');
  if (!found.ok) return found;
  await services.db.transaction((tx) =>
    recordEvent(tx, {
      commissionId: found.value.id,
      code: CODE,
      actor,
      sentence: `Rights settled: ${DESIGN_SOURCES[input.designSource].toLowerCase()}.`,
      at: services.now(),
      data: { ...input },
    }),
  );
  return done(input);
}

/** What stands about the rights: the studio's last note, or what the enquiry said. */
export async function readRights(db: Db, commission: CommissionRow): Promise<Rights> {
  const [row] = await db
    .select({ data: events.data })
    .from(events)
    .where(and(eq(events.commissionId, commission.id), eq(events.code, CODE)))
    .orderBy(desc(events.id))
    .limit(1);
  if (row) return rightsSchema.parse(row.data);
  const { designSource, licence, rightsNote } = commission.enquiry as Enquiry;
  return { designSource, ...(licence ? { licence } : {}), rightsNote: rightsNote ?? '' };
}
