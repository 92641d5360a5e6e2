import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import { tray } from '../../../src/server/db/schema/commissions';
import { mails } from '../../../src/server/db/schema/studio';
import { sendMail } from '../../../src/server/mail/send';
import { queueMail } from '../../../src/server/outbox';
import { openPostOffice, type PostOffice } from './post-office';
import { addCommission, jobs, mailRow, queueReceipt, setStudio } from './rows';
import { SAMPLES } from './sample-letters';

let office: PostOffice;
beforeEach(async () => {
  office = await openPostOffice();
  await setStudio(office.services, {});
});
afterEach(() => office.close());

const HOUR_MS = 60 * 60_000;
const later = (ms: number) => office.setNow(new Date(office.services.now().getTime() + ms));

describe('a mail that goes well', () => {
  test('arrives once, from us, answerable, tagged with its row', async () => {
    const id = await queueReceipt(office.services);
    await sendMail(office.services, id);
    const [mail, ...more] = await office.inbox();
    expect(more).toEqual([]);
    expect(mail).toMatchObject({
      to: ['isolde@example.org'],
      subject: 'Receipt 31 for MF-0181',
      reply_to: ['studio@example.org'],
    });
    expect(mail!.tags).toContainEqual({ name: 'mail', value: id });
    expect(mail!.html).toContain('£660.00');
    expect(mail!.text).toContain('£660.00');
    expect(await mailRow(office.services, id)).toMatchObject({
      state: 'sent',
      tries: 1,
      providerId: mail!.id,
      lastError: null,
    });
  });

  test('sent twice at once, it arrives once', async () => {
    const id = await queueReceipt(office.services);
    await Promise.all([sendMail(office.services, id), sendMail(office.services, id)]);
    await sendMail(office.services, id);
    expect(await office.inbox()).toHaveLength(1);
  });

  test('a sign-in mail leaves nothing behind that could sign anybody in', async () => {
    const at = office.services.now();
    const id = await queueMail(office.services.db, {
      letter: 'M0',
      to: 'a@example.org',
      cause: 'M0:1',
      at,
      data: SAMPLES.M0,
    });
    await sendMail(office.services, id!);
    expect((await office.inbox())[0]!.text).toContain(SAMPLES.M0.code);
    const row = await mailRow(office.services, id!);
    expect(row).toMatchObject({ state: 'sent', data: {}, html: null, text: null });
    expect(JSON.stringify(row)).not.toContain(SAMPLES.M0.code);
  });
});

describe('a mail service in trouble', () => {
  test('a 500 is noted in words, tried again soon, and one mail arrives', async () => {
    office.faults.set({ errors: { times: 2, status: 500 } });
    const id = await queueReceipt(office.services);
    await sendMail(office.services, id);
    expect(await mailRow(office.services, id)).toMatchObject({
      state: 'queued',
      tries: 1,
      lastError: 'The mail service is having trouble of its own.',
    });
    const waiting = await jobs(office.services);
    expect(waiting.map((job) => job.key)).toEqual([`mail:${id}`]);
    expect(waiting[0]!.run_at.getTime() - office.services.now().getTime()).toBe(2_000);
    await sendMail(office.services, id);
    await sendMail(office.services, id);
    expect(await office.inbox()).toHaveLength(1);
    expect(await mailRow(office.services, id)).toMatchObject({ state: 'sent', tries: 3, lastError: null });
  });

  test('an answer that was lost on the way back makes no second mail', async () => {
    office.faults.set({ dropAnswers: 1 });
    const id = await queueReceipt(office.services);
    await sendMail(office.services, id);
    expect(await mailRow(office.services, id)).toMatchObject({
      state: 'queued',
      lastError: 'The mail service could not be reached.',
    });
    await sendMail(office.services, id);
    expect(await office.inbox()).toHaveLength(1);
    expect(await mailRow(office.services, id)).toMatchObject({ state: 'sent' });
  });

  test('a day later, when keys are forgotten, the service is asked before sending again', async () => {
    office.faults.set({ dropAnswers: 1 });
    const id = await queueReceipt(office.services);
    await sendMail(office.services, id);
    office.faults.set({ advanceSeconds: 25 * 3600 });
    later(25 * HOUR_MS);
    const sending = vi.spyOn(office.services.resend.emails, 'send');
    await sendMail(office.services, id);
    expect(sending).not.toHaveBeenCalled();
    const inbox = await office.inbox();
    expect(inbox).toHaveLength(1);
    expect(await mailRow(office.services, id)).toMatchObject({ state: 'sent', providerId: inbox[0]!.id });
  });

  test('the same key with another body is taken as sent before, by its tag', async () => {
    office.faults.set({ dropAnswers: 1 });
    const id = await queueReceipt(office.services);
    await sendMail(office.services, id);
    await setStudio(office.services, { replyTo: 'other@example.org' });
    await sendMail(office.services, id);
    const inbox = await office.inbox();
    expect(inbox).toHaveLength(1);
    expect(await mailRow(office.services, id)).toMatchObject({ state: 'sent', providerId: inbox[0]!.id });
  });

  test('an address no mail service takes ends it at once and lies in the tray', async () => {
    const id = await queueReceipt(office.services, { to: 'nobody at nowhere' });
    await sendMail(office.services, id);
    expect(await mailRow(office.services, id)).toMatchObject({ state: 'failed', tries: 1 });
    const items = await office.services.db.select().from(tray);
    expect(items).toHaveLength(1);
    expect(items[0]!.problem.message).toContain('nobody at nowhere');
    expect(await jobs(office.services)).toHaveLength(1);
  });

  test('given up after three days, and told to the owner once', async () => {
    const id = await queueReceipt(office.services);
    office.faults.set({ errors: { times: 1, status: 503 } });
    await sendMail(office.services, id);
    later(73 * HOUR_MS);
    await sendMail(office.services, id);
    await sendMail(office.services, id);
    expect(await mailRow(office.services, id)).toMatchObject({ state: 'failed' });
    expect(await office.services.db.select().from(tray)).toHaveLength(1);
    expect(await office.inbox()).toEqual([]);
  });

  test('a sign-in mail that comes too late is not sent, and its code is gone', async () => {
    const at = office.services.now();
    const id = await queueMail(office.services.db, {
      letter: 'M0',
      to: 'a@example.org',
      cause: 'M0:2',
      at,
      data: SAMPLES.M0,
    });
    later(11 * 60_000);
    await sendMail(office.services, id!);
    expect(await mailRow(office.services, id!)).toMatchObject({ state: 'failed', data: {} });
    expect(await office.inbox()).toEqual([]);
    expect(await office.services.db.select().from(tray)).toEqual([]);
  });
});

describe('a mail that waits', () => {
  test('at night a progress mail waits for the morning and a receipt goes', async () => {
    await setStudio(office.services, { quietHours: { from: '20:30', to: '07:30' } });
    office.setNow(new Date('2027-01-12T23:10:00Z'));
    const at = office.services.now();
    const progress = await queueMail(office.services.db, {
      letter: 'M19',
      to: 'a@example.org',
      cause: 'M19:1',
      at,
      data: SAMPLES.M19,
    });
    const receipt = await queueReceipt(office.services);
    await sendMail(office.services, progress!);
    await sendMail(office.services, receipt);
    expect((await office.inbox()).map((mail) => mail.subject)).toEqual(['Receipt 31 for MF-0181']);
    expect(await mailRow(office.services, progress!)).toMatchObject({
      state: 'queued',
      tries: 0,
      notBefore: new Date('2027-01-13T07:30:00Z'),
    });
    const job = (await jobs(office.services)).find((each) => each.key === `mail:${progress}`);
    expect(job?.run_at).toEqual(new Date('2027-01-13T07:30:00Z'));
    office.setNow(new Date('2027-01-13T07:30:00Z'));
    await sendMail(office.services, progress!);
    expect(await office.inbox()).toHaveLength(2);
  });

  test('where progress is told once a week, the newest mail tells it with the others’ photos', async () => {
    await setStudio(office.services, { progressEveryDays: 7 });
    const { id: commissionId } = await addCommission(office.services);
    const queue = (cause: string, stage: 'mould' | 'poured' | 'sound') =>
      queueMail(office.services.db, {
        letter: 'M19',
        to: 'a@example.org',
        cause,
        commissionId,
        at: office.services.now(),
        data: { ...SAMPLES.M19, stage },
      });
    const first = await queue('M19:mould', 'mould');
    await sendMail(office.services, first!);
    later(24 * HOUR_MS);
    const second = await queue('M19:poured', 'poured');
    later(24 * HOUR_MS);
    const third = await queue('M19:sound', 'sound');
    await sendMail(office.services, second!);
    await sendMail(office.services, third!);
    expect(await office.inbox()).toHaveLength(1);
    later(5 * 24 * HOUR_MS);
    await sendMail(office.services, third!);
    expect((await office.inbox()).map((mail) => mail.subject)).toEqual([
      'A sound casting: MF-0181',
      'The mould is ready: MF-0181',
    ]);
    expect(await mailRow(office.services, second!)).toMatchObject({ state: 'merged' });
    expect((await mailRow(office.services, third!)).data).toMatchObject({ pictures: { length: 3 } });
  });
});

describe('an address whose mails came back', () => {
  test('gets no more, until one was delivered again', async () => {
    const first = await queueReceipt(office.services);
    await office.services.db
      .update(mails)
      .set({ state: 'bounced', bounce: 'permanent', providerId: 'p1', settledAt: office.services.now() })
      .where(eq(mails.id, first));
    const second = await queueReceipt(office.services, { cause: 'M12:second', to: 'Isolde@example.org' });
    await sendMail(office.services, second);
    expect(await mailRow(office.services, second)).toMatchObject({ state: 'bounced' });
    expect(await office.inbox()).toEqual([]);
    later(1_000);
    await office.services.db
      .update(mails)
      .set({ state: 'delivered', providerId: 'p2', settledAt: office.services.now() })
      .where(eq(mails.id, second));
    const third = await queueReceipt(office.services, { cause: 'M12:third' });
    await sendMail(office.services, third);
    expect(await office.inbox()).toHaveLength(1);
  });

  test('a mailbox that was only full gets the next one', async () => {
    const first = await queueReceipt(office.services);
    await office.services.db
      .update(mails)
      .set({ state: 'bounced', bounce: 'transient', providerId: 'p1', settledAt: office.services.now() })
      .where(eq(mails.id, first));
    await sendMail(office.services, await queueReceipt(office.services, { cause: 'M12:second' }));
    expect(await office.inbox()).toHaveLength(1);
  });
});
