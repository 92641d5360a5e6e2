import type { Role } from '../commission/permissions';

/** One person of the demo. `given` is what makers are shown. */
export interface DemoPerson {
  key: string;
  name: string;
  given: string;
  role: Role;
  email: string;
  phone?: string;
}

function person(key: string, name: string, role: Role, phone?: string): DemoPerson {
  const email = `${name
    .toLowerCase()
    .replace(/[^a-z ]/g, '')
    .replaceAll(' ', '.')}@example.org`;
  return { key, name, given: name.split(' ')[0]!, role, email, ...(phone ? { phone } : {}) };
}

/** The people of Marrowfen Casting House. All invented, like everybody else here. */
export const demoStaff = [
  person('wren', 'Wren Addlecombe', 'owner'),
  person('tobias', 'Tobias Marlhythe', 'owner'),
  person('juno', 'Juno Askerby', 'maker'),
  person('davit', 'Davit Roake', 'maker'),
  person('pell', 'Pell Ombersley', 'maker'),
  person('nessa', 'Nessa Holtwick', 'bookkeeper'),
];

/** Who commissions the demo's pieces. Telephone numbers are from the range kept free for invented people. */
export const demoCustomers = [
  person('isolde', 'Isolde Wintermere', 'customer', '+44 1632 960181'),
  person('maud', 'Maud Evershade', 'customer', '+44 1632 960178'),
  person('barnaby', 'Barnaby Oxgate', 'customer', '+44 1632 960182'),
  person('museum', 'Lenn Valley Museum', 'customer', '+44 1632 960185'),
  person('hester', 'Hester Quillane', 'customer', '+44 1632 960171'),
  person('ansel', 'Ansel Brackenroyd', 'customer'),
  person('odile', 'Odile Farthingale', 'customer', '+44 1632 960176'),
  person('corin', 'Corin Thackwell', 'customer'),
  person('veldhaven', 'Veldhaven Open-Air Park', 'customer'),
  person('rafe', 'Rafe Lindqvale', 'customer', '+44 1632 960180'),
  person('harrow', 'Cold Harrow art department', 'customer', '+44 1632 960183'),
  person('tamsin', 'Tamsin Reedham', 'customer'),
  person('jory', 'Jory Pellowe', 'customer'),
  { ...person('withheld', 'Name withheld', 'customer'), given: 'Name withheld' },
];

/** Everybody of the demo who can sign in, the studio first. */
export const demoPeople = [...demoStaff, ...demoCustomers];
