import { asc, eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import type { Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import type { NewMessage } from '../../commission/enquiry/triage';
import { limit } from '../auth/limit';
import { findCommission } from '../commissions';
import type { Db } from '../db/client';
import { messages } from '../db/schema/commissions';
import { users } from '../db/schema/people';
import { recordEvent } from '../history';
import type { Services } from '../services';

/** A message as both sides read it. `author` is a name to show, never an address. */
export interface MessageView {
  id: string;
  from: 'customer' | 'studio';
  author: string;
  body: string;
  at: Date;
}

/** Writes a message from the customer to the studio or back. The same client id again answers as the first did. */
export async function sendMessage(
  services: Services,
  actor: Actor,
  ref: string | undefined,
  input: NewMessage,
): Promise<Outcome<{ id: string }>> {
  const found = await findCommission(services, actor, ref, 'commission:write-message');
  if (!found.ok) return found;
  const known = await knownMessage(services.db, input.clientId);
  if (known) return sameMessage(known, found.value.id, actor!.id);
  const allowed = await limit(services, 'message', actor!.id);
  if (!allowed.ok) return allowed;
  return services.db.transaction(async (tx) => {
    const at = services.now();
    const [row] = await tx
      .insert(messages)
      .values({
        id: uuidv7(),
        commissionId: found.value.id,
        clientId: input.clientId,
        authorId: actor!.id,
        authorRole: actor!.role,
        body: input.body,
        at,
      })
      .onConflictDoNothing({ target: messages.clientId })
      .returning({ id: messages.id });
    if (!row) return sameMessage(await knownMessage(tx, input.clientId), found.value.id, actor!.id);
    await recordEvent(tx, {
      commissionId: found.value.id,
      code: 'message',
      actor,
      sentence: actor!.role === 'customer' ? 'The customer wrote a message.' : 'The studio wrote a message.',
      at,
      data: { message: row.id },
    });
    return done({ id: row.id });
  });
}

async function knownMessage(db: Db, clientId: string) {
  const [row] = await db.select().from(messages).where(eq(messages.clientId, clientId));
  return row;
}

function sameMessage(
  row: typeof messages.$inferSelect | undefined,
  commissionId: string,
  authorId: string,
): Outcome<{ id: string }> {
  return row?.commissionId === commissionId && row.authorId === authorId
    ? done({ id: row.id })
    : refuse('conflict', 'This message could not be kept under its number. Reload the page and send it again.');
}

/** The messages of a commission, the oldest first. */
export async function readMessages(db: Db, commissionId: string): Promise<MessageView[]> {
  const rows = await db
    .select({ message: messages, name: users.name, givenName: users.givenName })
    .from(messages)
    .leftJoin(users, eq(users.id, messages.authorId))
    .where(eq(messages.commissionId, commissionId))
    .orderBy(asc(messages.at), asc(messages.id));
  return rows.map(({ message, name, givenName }) => ({
    id: message.id,
    from: message.authorRole === 'customer' ? 'customer' : 'studio',
    author: givenName ?? name ?? (message.authorRole === 'customer' ? 'Customer' : 'The studio'),
    body: message.body,
    at: message.at,
  }));
}
