import { and, asc, eq, isNull, ne, or } from 'drizzle-orm';
import { z } from 'zod';
import { may, type Actor, type Role } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { STUDIO } from '../../commission/studio';
import { addressSchema } from '../auth/address';
import { limit } from '../auth/limit';
import { HOME } from '../auth/next-path';
import { endSessions } from '../auth/session';
import type { Transaction } from '../db/client';
import { invitations, users } from '../db/schema/people';
import type { Services } from '../services';
import { mailSignIn } from './sign-in';

export const STAFF_ROLES = ['maker', 'owner', 'bookkeeper'] as const;

/** A staff role in the words of an invitation and of the page. */
export const ROLE_WORDS: Record<Role, string> = {
  owner: 'owner',
  maker: 'maker',
  bookkeeper: 'bookkeeper',
  customer: 'customer',
};

const staffRole = z.enum(STAFF_ROLES, { error: 'Choose maker, owner or bookkeeper.' });

export const inviteSchema = z.object({
  name: z
    .string({ error: 'Type their name.' })
    .trim()
    .min(1, { error: 'Type their name, as makers and papers should show it.' })
    .max(120, { error: 'At most 120 characters fit here.' })
    .regex(/^[^\p{Cc}<>]*$/u, { error: 'Leave out line breaks and angle brackets.' }),
  email: addressSchema,
  role: staffRole,
});
export const roleSchema = z.object({ role: z.enum([...STAFF_ROLES, 'customer'], { error: 'Choose a role.' }) });
export const activeSchema = z.object({
  active: z.enum(['yes', 'no'], { error: 'Say whether they may sign in.' }).transform((word) => word === 'yes'),
});
export const withdrawSchema = z.object({ email: addressSchema });

type Staff = Pick<typeof users.$inferSelect, 'id' | 'name' | 'email' | 'role' | 'active'>;
type Invitation = Pick<typeof invitations.$inferSelect, 'email' | 'name' | 'role' | 'createdAt'>;

const NOT_ALLOWED = refuse('not-allowed', 'Only an owner of the studio invites people and changes roles.');

function mayManage(actor: Actor): actor is NonNullable<Actor> {
  return may(actor, 'people:manage');
}

/** Everybody who works at the studio or once did, and who is invited. */
export async function listPeople(
  { db }: Services,
  actor: Actor,
): Promise<Outcome<{ staff: Staff[]; invited: Invitation[] }>> {
  if (!mayManage(actor)) return NOT_ALLOWED;
  const staff = await db
    .select({ id: users.id, name: users.name, email: users.email, role: users.role, active: users.active })
    .from(users)
    .where(or(ne(users.role, 'customer'), eq(users.active, false)))
    .orderBy(asc(users.role), asc(users.name));
  const invited = await db
    .select({
      email: invitations.email,
      name: invitations.name,
      role: invitations.role,
      createdAt: invitations.createdAt,
    })
    .from(invitations)
    .where(isNull(invitations.acceptedAt))
    .orderBy(asc(invitations.createdAt));
  return done({ staff, invited });
}

/**
 * Invites a person to work at the studio: they are mailed a sign-in, and get the role when this address first signs
 * in, by that link or by any later one.
 */
export async function invitePerson(
  services: Services,
  actor: Actor,
  input: z.output<typeof inviteSchema>,
): Promise<Outcome<{ email: string }>> {
  if (!mayManage(actor)) return NOT_ALLOWED;
  const allowed = await limit(services, 'link-known-browser', input.email);
  if (!allowed.ok) return allowed;
  return services.db.transaction(async (tx) => {
    const [known] = await tx.select().from(users).where(eq(users.email, input.email));
    if (known && (known.role !== 'customer' || !known.active)) return alreadyHere(known);
    const invitation = { name: input.name, role: input.role, invitedBy: actor.id, acceptedAt: null };
    await tx
      .insert(invitations)
      .values({ email: input.email, ...invitation, createdAt: services.now() })
      .onConflictDoUpdate({ target: invitations.email, set: { ...invitation, createdAt: services.now() } });
    await mailSignIn(tx, services, {
      email: input.email,
      next: HOME[input.role],
      invitedAs: `${actor.name ?? STUDIO.name} has invited you to ${STUDIO.name} as ${ROLE_WORDS[input.role]}.`,
    });
    services.log.info({ by: actor.id, role: input.role }, 'person invited');
    return done({ email: input.email });
  });
}

function alreadyHere(known: typeof users.$inferSelect): Outcome<never> {
  return refuse(
    'conflict',
    known.active
      ? `${known.name ?? known.email} is already on the list, as ${ROLE_WORDS[known.role]}. Change the role there.`
      : `${known.name ?? known.email} is on the list, but may not sign in. Let them sign in again there.`,
    { email: 'This address is on the list already.' },
  );
}

/** Takes an invitation back that nobody has followed yet. */
export async function withdrawInvitation(
  { db }: Services,
  actor: Actor,
  input: z.output<typeof withdrawSchema>,
): Promise<Outcome<null>> {
  if (!mayManage(actor)) return NOT_ALLOWED;
  await db.delete(invitations).where(and(eq(invitations.email, input.email), isNull(invitations.acceptedAt)));
  return done(null);
}

/** Changes a person's role. Their sessions end at once; they sign in again to what they may see now. */
export async function changeRole(
  services: Services,
  actor: Actor,
  userId: string | undefined,
  input: z.output<typeof roleSchema>,
): Promise<Outcome<null>> {
  return changePerson(services, actor, userId, { role: input.role });
}

/** Lets a person sign in, or not any more; then their sessions end at once. */
export async function setActive(
  services: Services,
  actor: Actor,
  userId: string | undefined,
  input: z.output<typeof activeSchema>,
): Promise<Outcome<null>> {
  return changePerson(services, actor, userId, { active: input.active });
}

async function changePerson(
  services: Services,
  actor: Actor,
  userId: string | undefined,
  change: { role: Role } | { active: boolean },
): Promise<Outcome<null>> {
  if (!mayManage(actor)) return NOT_ALLOWED;
  if (!z.uuid().safeParse(userId).success) return nobody;
  return services.db.transaction(async (tx) => {
    const owners = await lockOwners(tx);
    const [person] = await tx.select().from(users).where(eq(users.id, userId!)).for('update');
    if (!person) return nobody;
    const after = { role: person.role, active: person.active, ...change };
    const staysOwner = after.role === 'owner' && after.active;
    if (!staysOwner && owners.every(({ id }) => id === person.id) && owners.length > 0) return lastOwner;
    if (after.role === person.role && after.active === person.active) return done(null);
    await tx.update(users).set(change).where(eq(users.id, person.id));
    await endSessions(tx, person.id);
    services.log.info({ by: actor.id, userId: person.id, ...change }, 'person changed');
    return done(null);
  });
}

const nobody = refuse('not-found', 'This person is not on the list any more. Reload the page.');
const lastOwner = refuse(
  'conflict',
  'This is the only owner who can sign in. Make somebody else owner first, or nobody could run the studio.',
);

/** The owners who can sign in, held until the transaction ends, so that two of them cannot remove each other. */
function lockOwners(tx: Transaction): Promise<{ id: string }[]> {
  return tx
    .select({ id: users.id })
    .from(users)
    .where(and(eq(users.role, 'owner'), eq(users.active, true)))
    .orderBy(asc(users.id))
    .for('update');
}
