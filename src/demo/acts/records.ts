import type { DealMove, Mover } from '../../commission/deal';
import { lockCommission } from '../../server/commissions';
import { moveDeal, recordEvent } from '../../server/history';
import { commissionOf, must, type World } from '../world';

/** What a line of history written here tells. `who` is nobody for the clock and the carrier. */
export interface Told {
  who: string | null;
  sentence: string;
  role?: string;
  /** For the studio's eyes. */
  inside?: boolean;
  data?: Record<string, unknown>;
}

function eventOf(world: World, { who, sentence, role, inside, data }: Told) {
  return {
    actor: who === null ? null : world.person(who),
    ...(role ? { actorRole: role } : {}),
    sentence,
    public: inside !== true,
    at: world.services.now(),
    ...(data ? { data } : {}),
  };
}

/** A move of the deal that has no page of its own, with its line of history. */
export async function move(world: World, ref: string, code: DealMove, mover: Mover, told: Told): Promise<void> {
  const { id } = await commissionOf(world, ref);
  await world.services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, id);
    must(await moveDeal(tx, commission, { move: code, mover, ...eventOf(world, told) }), `${ref} ${code}`);
  });
}

/** A line of history beside the moves. */
export async function note(world: World, ref: string, code: string, told: Told): Promise<void> {
  const { id } = await commissionOf(world, ref);
  await recordEvent(world.services.db, { commissionId: id, code, ...eventOf(world, told) });
}
