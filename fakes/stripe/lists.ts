import { badParam } from './errors';

export type ListAnswer<Row> = { object: 'list'; data: Row[]; has_more: boolean; url: string };

type Wanted = { limit?: number; starting_after?: string; ending_before?: string };
type Range = number | { gt?: number; gte?: number; lt?: number; lte?: number } | undefined;

const USUAL_LIMIT = 10;

/**
 * One page of a list whose rows come newest first, as Stripe cuts it: the rows after `starting_after`, or those just
 * before `ending_before`, 10 unless told.
 * @throws Refusal when both are given or the row named is not in the list.
 */
export function pageOf<Row extends { id: string }>(rows: Row[], wanted: Wanted, url: string): ListAnswer<Row> {
  const { starting_after: after, ending_before: before, limit = USUAL_LIMIT } = wanted;
  if (after && before) throw badParam('ending_before', 'Give starting_after or ending_before, not both.');
  if (before) {
    const end = placeOf(rows, before, 'ending_before');
    const start = Math.max(0, end - limit);
    return { object: 'list', data: rows.slice(start, end), has_more: start > 0, url };
  }
  const start = after ? placeOf(rows, after, 'starting_after') + 1 : 0;
  return { object: 'list', data: rows.slice(start, start + limit), has_more: rows.length > start + limit, url };
}

function placeOf(rows: { id: string }[], id: string, param: string): number {
  const place = rows.findIndex((row) => row.id === id);
  if (place < 0) throw badParam(param, `No such object in this list: '${id}'`, 'resource_missing');
  return place;
}

/** Whether an instant (Unix seconds) lies in the range asked for. */
export function inRange(instant: number, range: Range): boolean {
  if (range === undefined) return true;
  if (typeof range === 'number') return instant === range;
  const { gt = -Infinity, gte = -Infinity, lt = Infinity, lte = Infinity } = range;
  return instant > gt && instant >= gte && instant < lt && instant <= lte;
}
