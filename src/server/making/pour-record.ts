import { desc, eq } from 'drizzle-orm';
import { may, type Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { meanSoundness, soundnessOf } from '../../commission/pricing/soundness';
import { commissions } from '../db/schema/commissions';
import { attempts } from '../db/schema/making';
import { currentRates } from '../pricing/rates';
import type { Services } from '../services';

/** How one family of pieces has come out of the mould; `chance` of a sound pour, 0 to 1. */
export interface FamilyRecord {
  code: string;
  name: string;
  sound: number;
  failed: number;
  chance: number;
}

/** A casting given up. */
export interface ScrappedCasting {
  ref: string;
  mouldNo: string | null;
  cause: string;
  note: string | null;
  at: string;
}

/** What has been poured, for the owner's page about making. */
export interface PourRecord {
  families: FamilyRecord[];
  scrapped: ScrappedCasting[];
}

/** Soundness by family with the studio's own pours counted in, and the last 30 scrapped castings. */
export async function readPourRecord(services: Services, actor: Actor): Promise<Outcome<PourRecord>> {
  if (!may(actor, 'commission:triage'))
    return refuse(actor ? 'not-allowed' : 'sign-in-needed', 'This page is for the owner.');
  const rates = await currentRates(services.db);
  const rows = await services.db
    .select({ attempt: attempts, ref: commissions.ref })
    .from(attempts)
    .innerJoin(commissions, eq(commissions.id, attempts.commissionId))
    .where(eq(attempts.result, 'scrapped'))
    .orderBy(desc(attempts.closedAt))
    .limit(30);
  return done({
    families: rates.families.map((family) => ({
      code: family.code,
      name: family.name,
      sound: family.sound,
      failed: family.failed,
      chance: meanSoundness(soundnessOf(family, rates.pricing.priorPours)),
    })),
    scrapped: rows.map(({ attempt, ref }) => ({
      ref,
      mouldNo: attempt.mouldNo,
      cause: attempt.cause ?? '',
      note: attempt.causeNote,
      at: (attempt.closedAt ?? attempt.mouldAt).toISOString(),
    })),
  });
}
