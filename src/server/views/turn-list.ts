import { and, desc, gt, inArray, isNotNull, notInArray, or } from 'drizzle-orm';
import { DEAL_WORDS, type DealState } from '../../commission/deal';
import { may, type Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { daysBetween, type WhoseTurn } from '../../commission/turn/turn-facts';
import { listByTurn, waitingSince, type ListByTurn } from '../../commission/turn/turn-list';
import { commissions, messages } from '../db/schema/commissions';
import type { Services } from '../services';
import { turnsOf } from './turn-facts';

const ENDED: DealState[] = ['closed', 'declined', 'lapsed', 'cancelled'];
const DAY_MS = 24 * 60 * 60_000;
/** Ended commissions leave the list after this many days; they stay at their own address. */
const ENDED_SHOWN_DAYS = 30;

/** One line of the studio's lists. */
export interface TurnLine {
  ref: string;
  title: string;
  customer: string;
  deal: DealState;
  dealWords: string;
  turn: WhoseTurn;
  /** Whole days the one whose turn it is has been waited for. */
  days: number;
  /** When the customer wrote their last message, while it has no answer yet. */
  messageAt: Date | null;
}

/** The studio's page of whose turn it is: confirmed commissions that are open or ended lately. */
export async function readTurnList(services: Services, actor: Actor): Promise<Outcome<ListByTurn<TurnLine>>> {
  return withLines(services, actor, undefined, listByTurn);
}

/** What came in and is not quoted or closed yet, the oldest first. */
export async function readEnquiries(services: Services, actor: Actor): Promise<Outcome<TurnLine[]>> {
  const before: DealState[] = ['enquiry', 'asking', 'estimated', 'quoted', 'lapsed', 'declined'];
  return withLines(services, actor, before, (lines) =>
    lines.sort((a, b) => waitingSince(a).getTime() - waitingSince(b).getTime()),
  );
}

async function withLines<T>(
  services: Services,
  actor: Actor,
  deals: DealState[] | undefined,
  arrange: (lines: TurnLine[]) => T,
): Promise<Outcome<T>> {
  if (!may(actor, 'commission:triage'))
    return refuse(actor ? 'not-allowed' : 'sign-in-needed', 'This list is for the owners of the studio.');
  const now = services.now();
  const lately = new Date(now.getTime() - ENDED_SHOWN_DAYS * DAY_MS);
  const rows = await services.db
    .select()
    .from(commissions)
    .where(
      and(
        isNotNull(commissions.confirmedAt),
        deals ? inArray(commissions.deal, deals) : undefined,
        or(notInArray(commissions.deal, ENDED), gt(commissions.updatedAt, lately)),
      ),
    );
  const turns = await turnsOf(services.db, rows, now);
  const waiting = await unanswered(
    services,
    rows.map((row) => row.id),
  );
  return done(
    arrange(
      rows.map((row) => {
        const turn = turns.get(row.id)!;
        const messageAt = waiting.get(row.id) ?? null;
        return {
          ref: row.ref,
          title: row.title,
          customer: row.customerName,
          deal: row.deal,
          dealWords: DEAL_WORDS[row.deal],
          turn,
          days: daysBetween(waitingSince({ turn, messageAt }), now),
          messageAt,
        };
      }),
    ),
  );
}

/** When each commission's last message was written, where it is the customer's. */
async function unanswered({ db }: Services, ids: string[]): Promise<Map<string, Date>> {
  if (ids.length === 0) return new Map();
  const last = await db
    .selectDistinctOn([messages.commissionId], {
      id: messages.commissionId,
      role: messages.authorRole,
      at: messages.at,
    })
    .from(messages)
    .where(inArray(messages.commissionId, ids))
    .orderBy(messages.commissionId, desc(messages.at), desc(messages.id));
  return new Map(last.filter((row) => row.role === 'customer').map((row) => [row.id, row.at]));
}
