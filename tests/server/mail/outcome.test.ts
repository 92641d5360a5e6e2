import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { tray } from '../../../src/server/db/schema/commissions';
import { recordMailEvent, verifyMailEvent } from '../../../src/server/mail/outcome';
import { sendMail } from '../../../src/server/mail/send';
import { openPostOffice, type Posted, type PostOffice } from './post-office';
import { mailRow, queueReceipt } from './rows';

let office: PostOffice;
beforeEach(async () => (office = await openPostOffice()));
afterEach(() => office.close());

/** Waits until the mail service has posted an event of this type, and returns it. */
async function postedEvent(type: string): Promise<Posted> {
  const find = () => office.posted.find((event) => event.body.includes(`"${type}"`));
  await expect.poll(find, { timeout: 5_000 }).toBeDefined();
  return find()!;
}

function verified(event: Posted) {
  const outcome = verifyMailEvent(office.services, event.body, event.headers);
  if (!outcome.ok) throw new Error(outcome.problem.message);
  return outcome.value;
}

async function sent(to = 'isolde@example.org') {
  const id = await queueReceipt(office.services, { to });
  await sendMail(office.services, id);
  return id;
}

describe('signatures', () => {
  test('a good one passes; a changed body, a foreign one and a missing one are refused', async () => {
    await sent();
    const event = await postedEvent('email.delivered');
    expect(verifyMailEvent(office.services, event.body, event.headers).ok).toBe(true);
    expect(verifyMailEvent(office.services, event.body.replace('delivered', 'bounced!!'), event.headers).ok).toBe(
      false,
    );
    expect(verifyMailEvent(office.services, event.body, new Headers()).ok).toBe(false);
    const foreign = {
      ...office.services,
      config: { ...office.services.config, resendWebhookSecret: 'whsec_Zm9yZWlnbg==' },
    };
    expect(verifyMailEvent(foreign, event.body, event.headers).ok).toBe(false);
  });
});

describe('what became of a mail', () => {
  test('delivered, told twenty times at once, is noted once', async () => {
    const id = await sent();
    const event = verified(await postedEvent('email.delivered'));
    const outcomes = await Promise.all(Array.from({ length: 20 }, () => recordMailEvent(office.services, event)));
    expect(outcomes.filter((outcome) => outcome === 'delivered')).toHaveLength(1);
    expect(await mailRow(office.services, id)).toMatchObject({
      state: 'delivered',
      settledAt: expect.any(Date) as Date,
    });
  });

  test('a bounce lies in the tray once, however often it is told', async () => {
    const id = await sent('bounce@example.org');
    const event = verified(await postedEvent('email.bounced'));
    await Promise.all(Array.from({ length: 20 }, () => recordMailEvent(office.services, event)));
    expect(await mailRow(office.services, id)).toMatchObject({ state: 'bounced', bounce: 'permanent' });
    const items = await office.services.db.select().from(tray);
    expect(items).toHaveLength(1);
    expect(items[0]!.problem.message).toContain('bounce@example.org');
  });

  test('"delivered" that comes after a bounce changes nothing', async () => {
    const id = await sent('bounce@example.org');
    const bounced = verified(await postedEvent('email.bounced'));
    await recordMailEvent(office.services, bounced);
    const late = { ...bounced, type: 'email.delivered' } as typeof bounced;
    expect(await recordMailEvent(office.services, late)).toBe('ignored');
    expect(await mailRow(office.services, id)).toMatchObject({ state: 'bounced' });
  });

  test('a complaint after delivery is noted and told to the owner', async () => {
    const id = await sent('complain@example.org');
    await recordMailEvent(office.services, verified(await postedEvent('email.delivered')));
    await recordMailEvent(office.services, verified(await postedEvent('email.complained')));
    expect(await mailRow(office.services, id)).toMatchObject({ state: 'complained' });
    expect(await office.services.db.select().from(tray)).toHaveLength(1);
  });

  test('news that comes before our own note finds its mail by the tag', async () => {
    const id = await sent();
    const event = verified(await postedEvent('email.delivered'));
    await office.services.pool.query("update mails set state = 'queued', provider_id = null, sent_at = null");
    expect(await recordMailEvent(office.services, event)).toBe('delivered');
    await sendMail(office.services, id);
    expect(await mailRow(office.services, id)).toMatchObject({ state: 'delivered' });
    expect(await office.inbox()).toHaveLength(1);
  });

  test('news of somebody else’s mail is left alone', async () => {
    await sent();
    const event = verified(await postedEvent('email.delivered'));
    await office.services.pool.query('truncate mails');
    expect(await recordMailEvent(office.services, event)).toBe('unknown');
  });
});
