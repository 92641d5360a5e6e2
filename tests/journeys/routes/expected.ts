import { may, type Permission } from '../../../src/commission/permissions';
import type { Person } from '../scene';
import type { Rule } from './rules.table';

/** Whose thing a request is about: the first customer's, somebody else's, or nothing that exists. */
export type Target = 'own' | 'other' | 'none';

/** What must come back: a status, or `allowed` for whatever a permitted sending to that state gives. */
export type Expected = number | 'allowed';

interface Asked {
  rule: Rule;
  isDoor: boolean;
  actor: Person | null;
  /** Customer of the commission asked about; undefined when the route is about none, null when there is none such. */
  customerId: string | null | undefined;
}

/** The answer that the permissions' table asks for. */
export function expectedAnswer({ rule, isDoor, actor, customerId }: Asked): Expected {
  if (rule.open !== undefined) return rule.open;
  if (actor && rule.leads?.includes(actor.role)) return 303;
  if (rule.signedIn) return actor ? 'allowed' : isDoor ? 401 : 303;
  const permission = rule.may!;
  if (customerId === undefined) return may(actor, permission) ? 'allowed' : turnedAway(rule, actor, isDoor);
  if (!everMay(actor, permission)) return turnedAway(rule, actor, isDoor);
  if (customerId === null) return 404;
  return may(actor, permission, { customerId }) ? 'allowed' : 404;
}

/** True when this actor may do this to something, at least to their own. */
function everMay(actor: Person | null, permission: Permission): boolean {
  return may(actor, permission, actor ? { customerId: actor.id } : undefined);
}

function turnedAway(rule: Rule, actor: Person | null, isDoor: boolean): number {
  if (rule.hides) return 404;
  if (actor) return 403;
  return isDoor ? 401 : 303;
}
