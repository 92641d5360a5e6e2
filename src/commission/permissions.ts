/** Who a person is to the studio; `guest` is nobody signed in. */
export type Role = 'customer' | 'maker' | 'owner' | 'bookkeeper';
export type Actor = { id: string; role: Role; email: string; name: string | null } | null;

/**
 * What may be done, and by whom. `own` means: only on a commission whose customer they are.
 * `staff` roles see every commission where the table says `yes`.
 */
const TABLE = {
  'estimate:make': { guest: 'yes', customer: 'yes', maker: 'no', owner: 'yes', bookkeeper: 'no' },
  'enquiry:send': { guest: 'yes', customer: 'yes', maker: 'no', owner: 'yes', bookkeeper: 'no' },
  'upload:send': { guest: 'yes', customer: 'yes', maker: 'no', owner: 'yes', bookkeeper: 'no' },
  'upload:read': { guest: 'no', customer: 'own', maker: 'no', owner: 'yes', bookkeeper: 'no' },
  'commission:read': { guest: 'no', customer: 'own', maker: 'no', owner: 'yes', bookkeeper: 'no' },
  'commission:answer': { guest: 'no', customer: 'own', maker: 'no', owner: 'no', bookkeeper: 'no' },
  'commission:write-message': { guest: 'no', customer: 'own', maker: 'no', owner: 'yes', bookkeeper: 'no' },
  'commission:triage': { guest: 'no', customer: 'no', maker: 'no', owner: 'yes', bookkeeper: 'no' },
  'quote:write': { guest: 'no', customer: 'no', maker: 'no', owner: 'yes', bookkeeper: 'no' },
  'quote:read': { guest: 'no', customer: 'own', maker: 'no', owner: 'yes', bookkeeper: 'yes' },
  'quote:accept': { guest: 'no', customer: 'own', maker: 'no', owner: 'no', bookkeeper: 'no' },
  'payment:pay': { guest: 'no', customer: 'own', maker: 'no', owner: 'no', bookkeeper: 'no' },
  'payment:record': { guest: 'no', customer: 'no', maker: 'no', owner: 'yes', bookkeeper: 'no' },
  'money:read': { guest: 'no', customer: 'own', maker: 'no', owner: 'yes', bookkeeper: 'yes' },
  'bench:read': { guest: 'no', customer: 'no', maker: 'yes', owner: 'yes', bookkeeper: 'no' },
  'bench:work': { guest: 'no', customer: 'no', maker: 'yes', owner: 'yes', bookkeeper: 'no' },
  'gate:decide': { guest: 'no', customer: 'own', maker: 'no', owner: 'no', bookkeeper: 'no' },
  'photo:read': { guest: 'no', customer: 'own', maker: 'yes', owner: 'yes', bookkeeper: 'no' },
  'dispatch:send': { guest: 'no', customer: 'no', maker: 'no', owner: 'yes', bookkeeper: 'no' },
  'people:manage': { guest: 'no', customer: 'no', maker: 'no', owner: 'yes', bookkeeper: 'no' },
  'rates:write': { guest: 'no', customer: 'no', maker: 'no', owner: 'yes', bookkeeper: 'no' },
  'mail:read': { guest: 'no', customer: 'no', maker: 'no', owner: 'yes', bookkeeper: 'no' },
} as const satisfies Record<string, Record<Role | 'guest', 'yes' | 'no' | 'own'>>;

/** The name of something that can be allowed. */
export type Permission = keyof typeof TABLE;
export const PERMISSIONS = Object.keys(TABLE) as Permission[];

/** What a permission is about, when it is about one commission. */
export interface Owned {
  customerId: string | null;
}

/** True when the actor may do this, to this commission when one is named. */
export function may(actor: Actor, permission: Permission, owned?: Owned): boolean {
  const answer = TABLE[permission][actor?.role ?? 'guest'];
  if (answer === 'own') return owned !== undefined && actor !== null && owned.customerId === actor.id;
  return answer === 'yes';
}
