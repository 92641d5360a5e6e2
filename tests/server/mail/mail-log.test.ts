import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import type { Actor, Role } from '../../../src/commission/permissions';
import { mails } from '../../../src/server/db/schema/studio';
import { users } from '../../../src/server/db/schema/people';
import { events } from '../../../src/server/db/schema/commissions';
import { sendMail } from '../../../src/server/mail/send';
import { listMails, mailLogSchema, sendMailAgain } from '../../../src/server/mail/mail-log';
import { queueMail } from '../../../src/server/outbox';
import { openPostOffice, type PostOffice } from './post-office';
import { addCommission, mailRow, queueReceipt, setStudio } from './rows';
import { SAMPLES } from './sample-letters';

let office: PostOffice;
let owner: Actor;
beforeEach(async () => {
  office = await openPostOffice();
  await setStudio(office.services, {});
  const [row] = await office.services.db.insert(users).values({ email: 'wren@example.org', role: 'owner' }).returning();
  owner = { id: row!.id, role: 'owner', email: 'wren@example.org', name: 'Wren Addlecombe' };
});
afterEach(() => office.close());

async function sentLetter() {
  const { id: commissionId } = await addCommission(office.services);
  const at = office.services.now();
  const id = await queueMail(office.services.db, {
    letter: 'M12',
    to: 'isolde@example.org',
    cause: 'M12:1',
    commissionId,
    at,
    data: SAMPLES.M12,
  });
  await sendMail(office.services, id!);
  return id!;
}

const all = mailLogSchema.parse({});

describe('the mail log', () => {
  test.each<Role | 'guest'>(['customer', 'maker', 'bookkeeper', 'guest'])('is closed to %s', async (role) => {
    const actor: Actor = role === 'guest' ? null : { id: owner!.id, role, email: 'x@example.org', name: null };
    const id = await sentLetter();
    expect((await listMails(office.services, actor, all)).ok).toBe(false);
    expect((await sendMailAgain(office.services, actor, id, { again: 0 })).ok).toBe(false);
    expect(await office.services.db.select().from(mails)).toHaveLength(1);
  });

  test('shows each mail with its commission, and only those that were asked for', async () => {
    const id = await sentLetter();
    await queueReceipt(office.services, { cause: 'M12:2', to: 'other@example.org' });
    const everything = await listMails(office.services, owner, all);
    expect(everything.ok && everything.value.mails.map((mail) => [mail.to, mail.ref, mail.state])).toEqual([
      ['other@example.org', null, 'queued'],
      ['isolde@example.org', 'MF-0181', 'sent'],
    ]);
    const asked = mailLogSchema.parse({ commission: ' mf-0181 ', state: 'sent' });
    const some = await listMails(office.services, owner, asked);
    expect(some.ok && some.value.mails.map((mail) => mail.id)).toEqual([id]);
  });

  test('pages by fifty without losing or repeating any', async () => {
    for (let n = 0; n < 53; n += 1) await queueReceipt(office.services, { cause: `M12:page:${n}` });
    const first = await listMails(office.services, owner, all);
    if (!first.ok || !first.value.older) throw new Error('there should be a second page');
    const second = await listMails(office.services, owner, mailLogSchema.parse({ before: first.value.older }));
    const ids = [...first.value.mails, ...(second.ok ? second.value.mails : [])].map((mail) => mail.id);
    expect(new Set(ids).size).toBe(53);
    expect(ids).toHaveLength(53);
  });

  test('nonsense in the address shows everything instead of an error', () => {
    expect(mailLogSchema.parse({ commission: "'; drop", state: 'lost', before: '7' })).toEqual({});
  });
});

describe('send again', () => {
  test('pressed twice on one page, it sends one more mail, word for word', async () => {
    const id = await sentLetter();
    const presses = await Promise.all([1, 2].map(() => sendMailAgain(office.services, owner, id, { again: 0 })));
    const [made, same] = presses.map((press) => (press.ok ? press.value.id : null));
    expect(made).toBe(same);
    await sendMail(office.services, made!);
    const inbox = await office.inbox();
    expect(inbox).toHaveLength(2);
    expect(inbox[0]!.html).toBe(inbox[1]!.html);
    expect(await office.services.db.select().from(events)).toHaveLength(1);
    const log = await listMails(office.services, owner, all);
    expect(log.ok && log.value.mails.find((mail) => mail.id === id)?.again).toBe(1);
  });

  test('goes to an address whose mails came back', async () => {
    const id = await sentLetter();
    await office.services.pool.query("update mails set state = 'bounced', bounce = 'permanent', settled_at = now()");
    const press = await sendMailAgain(office.services, owner, id, { again: 0 });
    await sendMail(office.services, press.ok ? press.value.id : '');
    expect(await office.inbox()).toHaveLength(2);
  });

  test('a sign-in mail, one that still waits and one that does not exist are refused with the reason', async () => {
    const at = office.services.now();
    const signIn = await queueMail(office.services.db, {
      letter: 'M0',
      to: 'a@example.org',
      cause: 'M0:1',
      at,
      data: SAMPLES.M0,
    });
    await sendMail(office.services, signIn!);
    const waiting = await queueReceipt(office.services);
    const refused = await Promise.all(
      [signIn!, waiting, owner!.id, 'x'].map((id) => sendMailAgain(office.services, owner, id, { again: 0 })),
    );
    expect(refused.map((outcome) => (outcome.ok ? 'done' : outcome.problem.code))).toEqual([
      'conflict',
      'conflict',
      'not-found',
      'not-found',
    ]);
    expect((await mailRow(office.services, signIn!)).data).toEqual({});
  });
});
