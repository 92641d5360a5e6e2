import { describe, expect, it } from 'vitest';
import { may, PERMISSIONS, type Actor, type Permission, type Role } from '../../src/commission/permissions';

const person = (role: Role): NonNullable<Actor> => ({ id: role, role, email: `${role}@example.org`, name: null });
const own = (role: Role) => ({ customerId: role });
const others = { customerId: 'somebody else' };
const nobodys = { customerId: null };

/**
 * Each permission spelled out by hand: who may, on whose commission. The rule behind the rows is the studio's own: a
 * customer sees only their own commission; a maker sees the work, not money and not the customer; a bookkeeper reads
 * money and papers and changes nothing; the owner does everything except what is the customer's to decide.
 */
const ROWS: [
  Permission,
  { guest: boolean; own: boolean; other: boolean; maker: boolean; owner: boolean; books: boolean },
][] = [
  ['estimate:make', { guest: true, own: true, other: true, maker: false, owner: true, books: false }],
  ['enquiry:send', { guest: true, own: true, other: true, maker: false, owner: true, books: false }],
  ['upload:send', { guest: true, own: true, other: true, maker: false, owner: true, books: false }],
  ['upload:read', { guest: false, own: true, other: false, maker: false, owner: true, books: false }],
  ['commission:read', { guest: false, own: true, other: false, maker: false, owner: true, books: false }],
  ['commission:answer', { guest: false, own: true, other: false, maker: false, owner: false, books: false }],
  ['commission:write-message', { guest: false, own: true, other: false, maker: false, owner: true, books: false }],
  ['commission:triage', { guest: false, own: false, other: false, maker: false, owner: true, books: false }],
  ['quote:write', { guest: false, own: false, other: false, maker: false, owner: true, books: false }],
  ['quote:read', { guest: false, own: true, other: false, maker: false, owner: true, books: true }],
  ['quote:accept', { guest: false, own: true, other: false, maker: false, owner: false, books: false }],
  ['payment:pay', { guest: false, own: true, other: false, maker: false, owner: false, books: false }],
  ['payment:record', { guest: false, own: false, other: false, maker: false, owner: true, books: false }],
  ['money:read', { guest: false, own: true, other: false, maker: false, owner: true, books: true }],
  ['bench:read', { guest: false, own: false, other: false, maker: true, owner: true, books: false }],
  ['bench:work', { guest: false, own: false, other: false, maker: true, owner: true, books: false }],
  ['gate:decide', { guest: false, own: true, other: false, maker: false, owner: false, books: false }],
  ['photo:read', { guest: false, own: true, other: false, maker: true, owner: true, books: false }],
  ['dispatch:send', { guest: false, own: false, other: false, maker: false, owner: true, books: false }],
  ['people:manage', { guest: false, own: false, other: false, maker: false, owner: true, books: false }],
  ['rates:write', { guest: false, own: false, other: false, maker: false, owner: true, books: false }],
  ['mail:read', { guest: false, own: false, other: false, maker: false, owner: true, books: false }],
];

describe('permissions', () => {
  it.each(ROWS)('%s', (permission, expected) => {
    expect({
      guest: may(null, permission, others),
      own: may(person('customer'), permission, own('customer')),
      other: may(person('customer'), permission, others),
      maker: may(person('maker'), permission, others),
      owner: may(person('owner'), permission, others),
      books: may(person('bookkeeper'), permission, others),
    }).toEqual(expected);
  });

  it('leaves no permission out', () => {
    expect(ROWS.map(([permission]) => permission).sort()).toEqual([...PERMISSIONS].sort());
  });

  it('gives a maker the bench and the photos, and nothing of money, quotes or customers', () => {
    const granted = PERMISSIONS.filter((permission) => may(person('maker'), permission, others));
    expect(granted.sort()).toEqual(['bench:read', 'bench:work', 'photo:read']);
  });

  it('gives a maker or bookkeeper nothing more on a commission that names them', () => {
    for (const role of ['maker', 'bookkeeper'] as const) {
      for (const permission of PERMISSIONS) {
        expect(may(person(role), permission, own(role))).toBe(may(person(role), permission, others));
      }
    }
  });

  it('gives "own" to nobody on a commission without a customer, or without a commission named', () => {
    const mine = PERMISSIONS.filter(
      (permission) =>
        may(person('customer'), permission, own('customer')) && !may(person('customer'), permission, others),
    );
    expect(mine).toContain('commission:read');
    for (const permission of mine) {
      expect(may(person('customer'), permission, nobodys)).toBe(false);
      expect(may(person('customer'), permission)).toBe(false);
      expect(may(null, permission, nobodys)).toBe(false);
    }
  });
});
