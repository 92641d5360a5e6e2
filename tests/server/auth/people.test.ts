import { eq } from 'drizzle-orm';
import { afterAll, beforeEach, describe, expect, it } from 'vitest';
import type { Role } from '../../../src/commission/permissions';
import { openSession } from '../../../src/server/auth/session';
import { invitations, users } from '../../../src/server/db/schema/people';
import { mails } from '../../../src/server/db/schema/studio';
import { LETTER_DATA } from '../../../src/server/mail/letter-data';
import { frameFor, renderLetter } from '../../../src/server/mail/render';
import { readStudioFacts } from '../../../src/server/mail/studio-facts';
import {
  changeRole,
  inviteSchema,
  invitePerson,
  listPeople,
  setActive,
  withdrawInvitation,
} from '../../../src/server/people/people';
import type { Services } from '../../../src/server/services';
import { spendLink } from '../../../src/server/people/sign-in-spend';
import { createTestServices } from '../../setup/database';
import { askAndRead, cookieOf, newestMail, person, whoIs } from './mailed';

let services: Services;
const drops: (() => Promise<void>)[] = [];
let owner: NonNullable<Parameters<typeof listPeople>[1]>;
beforeEach(async () => {
  const made = await createTestServices();
  services = made.services;
  drops.push(made.drop);
  owner = await actor('wren@example.org', 'owner', 'Wren Addlecombe');
});
afterAll(() => Promise.all(drops.map((drop) => drop())));

async function actor(email: string, role: Role, name = 'Somebody Here') {
  return { id: await person(services, email, role, name), role, email, name };
}

const juno = inviteSchema.parse({ name: 'Juno Askerby', email: 'Juno@example.org', role: 'maker' });

async function signIn(email: string) {
  const mail = await askAndRead(services, email);
  const signedIn = await spendLink(services, mail);
  if (!signedIn.ok) throw new Error(signedIn.problem.message);
  return whoIs(services, cookieOf(signedIn.value));
}

describe('an invitation', () => {
  it('is mailed, and gives its role at the first sign-in', async () => {
    expect(await invitePerson(services, owner, juno)).toEqual({ ok: true, value: { email: 'juno@example.org' } });
    const [mail] = await services.db.select().from(mails);
    expect(mail).toMatchObject({ letter: 'M0', to: 'juno@example.org' });
    expect(mail!.data['invitedAs']).toBe('Wren Addlecombe has invited you to Marrowfen Casting House as maker.');
    const signedIn = await spendLink(services, await newestMail(services, 'juno@example.org'));
    if (!signedIn.ok) throw new Error(signedIn.problem.message);
    expect(signedIn.value.next).toBe('/bench');
    expect(await whoIs(services, cookieOf(signedIn.value))).toMatchObject({ role: 'maker', name: 'Juno Askerby' });
    expect(await listPeople(services, owner)).toMatchObject({ value: { invited: [] } });
  });

  it('holds for a sign-in asked for later, and is taken once', async () => {
    await invitePerson(services, owner, juno);
    expect(await signIn('juno@example.org')).toMatchObject({ role: 'maker' });
    const [row] = await services.db.select().from(users).where(eq(users.email, 'juno@example.org'));
    await changeRole(services, owner, row!.id, { role: 'customer' });
    expect(await signIn('juno@example.org')).toMatchObject({ role: 'customer' });
  });

  it('makes staff of a customer and ends what they had open', async () => {
    const customer = await actor('juno@example.org', 'customer', 'Juno A.');
    const { name, value } = await openSession(services, customer.id);
    await invitePerson(services, owner, juno);
    expect(await signIn('juno@example.org')).toMatchObject({ id: customer.id, role: 'maker', name: 'Juno A.' });
    expect(await whoIs(services, `${name}=${value}`)).toBeNull();
  });

  it('is not sent to somebody who is on the list', async () => {
    await actor('juno@example.org', 'bookkeeper');
    expect(await invitePerson(services, owner, juno)).toMatchObject({ ok: false, problem: { code: 'conflict' } });
    expect(await services.db.select().from(invitations)).toEqual([]);
  });

  it('taken back gives no role', async () => {
    await invitePerson(services, owner, juno);
    await withdrawInvitation(services, owner, { email: 'juno@example.org' });
    expect(await signIn('juno@example.org')).toMatchObject({ role: 'customer' });
  });
});

describe('the last owner', () => {
  it('keeps role and sign-in', async () => {
    for (const change of [
      changeRole(services, owner, owner.id, { role: 'maker' }),
      setActive(services, owner, owner.id, { active: false }),
    ]) {
      expect(await change).toMatchObject({ ok: false, problem: { code: 'conflict' } });
    }
  });

  it('is left when two owners take each other’s role away at once', async () => {
    for (let round = 0; round < 5; round++) {
      await services.db.update(users).set({ role: 'owner' }).where(eq(users.id, owner.id));
      const other = await actor(`tobias-${round}@example.org`, 'owner');
      const both = await Promise.all([
        changeRole(services, owner, other.id, { role: 'maker' }),
        changeRole(services, other, owner.id, { role: 'maker' }),
      ]);
      expect(both.filter(({ ok }) => ok)).toHaveLength(1);
      expect(await services.db.select().from(users).where(eq(users.role, 'owner'))).toHaveLength(1);
      await services.db.update(users).set({ role: 'maker' }).where(eq(users.id, other.id));
    }
  });

  it('may be one of two who goes', async () => {
    const tobias = await actor('tobias@example.org', 'owner');
    expect((await setActive(services, owner, tobias.id, { active: false })).ok).toBe(true);
    expect(await changeRole(services, owner, owner.id, { role: 'maker' })).toMatchObject({ ok: false });
    expect((await setActive(services, owner, tobias.id, { active: true })).ok).toBe(true);
    expect((await changeRole(services, owner, owner.id, { role: 'maker' })).ok).toBe(true);
  });
});

it.each(['customer', 'maker', 'bookkeeper', null] as const)('is closed to a %s', async (role) => {
  const who = role ? await actor(`${role}@example.org`, role) : null;
  const tried = await Promise.all([
    listPeople(services, who),
    invitePerson(services, who, juno),
    withdrawInvitation(services, who, { email: 'juno@example.org' }),
    changeRole(services, who, owner.id, { role: 'customer' }),
    setActive(services, who, owner.id, { active: false }),
  ]);
  expect(tried.map((outcome) => !outcome.ok && outcome.problem.code)).toEqual(Array(5).fill('not-allowed'));
  expect(await services.db.select().from(mails)).toEqual([]);
});

it('says so when there is no such person', async () => {
  for (const id of [undefined, 'x', '00000000-0000-4000-8000-000000000000']) {
    expect(await changeRole(services, owner, id, { role: 'maker' })).toMatchObject({ problem: { code: 'not-found' } });
  }
});

it('refuses somebody who was taken off the list only after the mail proved the address theirs', async () => {
  const gone = await actor('gone@example.org', 'maker');
  await setActive(services, owner, gone.id, { active: false });
  const mail = await askAndRead(services, 'gone@example.org');
  expect(await spendLink(services, mail)).toMatchObject({ ok: false, problem: { code: 'not-allowed' } });
});

it('tells the invited person who asked them, as what, and what to do once the link has run out', async () => {
  await invitePerson(services, owner, juno);
  const [row] = await services.db.select().from(mails);
  const frame = frameFor(services.config, await readStudioFacts(services.db));
  const rendered = await renderLetter('M0', LETTER_DATA.M0.parse(row!.data), frame);
  expect(rendered.subject).toBe('Your invitation to Marrowfen Casting House');
  expect(rendered.text).toContain('Wren Addlecombe has invited you to Marrowfen Casting House as maker.');
  expect(rendered.text).toMatch(/the\s+invitation\s+stays/);
});
