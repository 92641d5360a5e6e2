import { and, eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { enquirySchema } from '../../../src/commission/enquiry/enquiry';
import { estimate } from '../../../src/commission/pricing/estimate';
import { events, uploads } from '../../../src/server/db/schema/commissions';
import { mails } from '../../../src/server/db/schema/studio';
import { confirmEnquiries } from '../../../src/server/enquiry/confirm-enquiries';
import { sendEnquiry, waitingEnquiry } from '../../../src/server/enquiry/enquiries';
import { currentRateCard } from '../../../src/server/pricing/rates';
import { codeOf, commission, enquiry, letters, openSetting, SENDER, START, type Setting } from './deal-setting';

let setting: Setting;
beforeAll(async () => {
  setting = await openSetting();
});
afterAll(() => setting.drop());

async function upload(browserId: string, commissionId: string | null = null) {
  const id = uuidv7();
  await setting.services.db.insert(uploads).values({
    id,
    clientId: id,
    browserId,
    commissionId,
    kind: 'picture',
    displayName: 'front.jpg',
    mime: 'image/jpeg',
    bytes: 10,
    sha256: 'x',
    storageKey: id,
    createdAt: START,
  });
  return id;
}

describe('T1, an enquiry', () => {
  it('of a signed-in customer counts at once, with the estimate reckoned on the server and both mails', async () => {
    const { services, customer } = setting;
    const input = enquiry({ pieces: '2' });
    const sent = await sendEnquiry(services, customer, SENDER, input);
    expect(sent).toMatchObject({ ok: true, value: { confirmed: true, email: customer.email } });
    if (!sent.ok) return;
    const row = await commission(setting, sent.value.ref);
    const card = await currentRateCard(services);
    const reckoned = estimate(row.estimateRequest as never, card);
    expect(reckoned.ok && row.estimate).toEqual(reckoned.ok && JSON.parse(JSON.stringify(reckoned.value)));
    expect(row).toMatchObject({ deal: 'enquiry', pieces: 2, bladed: true, family: 'thin', customerId: customer.id });
    expect(row.ref).toMatch(/^MF-\d{4}$/);
    expect(await letters(setting, row.ref)).toEqual(['M1 to isolde@example.org', 'M2 to wren@example.org']);
  });

  it('is not taken in for a day that is past', async () => {
    const past = enquiry({ neededBy: 'date', neededByDate: '2020-01-01' });
    expect(await sendEnquiry(setting.services, setting.customer, SENDER, past)).toMatchObject({
      ok: false,
      problem: { code: 'invalid', fields: { neededByDate: expect.stringContaining('past') } },
    });
  });

  it('pressed again, or eight times at once, is one commission', async () => {
    const { services, customer } = setting;
    const input = enquiry();
    const sent = await Promise.all(
      Array.from({ length: 8 }, () => sendEnquiry(services, customer, { ...SENDER, client: '192.0.2.8' }, input)),
    );
    const refs = new Set(sent.map((outcome) => (outcome.ok ? outcome.value.ref : outcome.problem.code)));
    expect([...refs]).toEqual([expect.stringMatching(/^MF-/)]);
    const again = await sendEnquiry(services, customer, SENDER, input);
    expect(again.ok && refs.has(again.value.ref)).toBe(true);
    expect(await letters(setting, [...refs][0]!)).toHaveLength(2);
  });

  it('of a guest waits for the address, then counts once with its mails and files, however often it is confirmed', async () => {
    const { services } = setting;
    const sender = { browserId: 'guest-browser', client: '192.0.2.9' };
    const file = await upload('guest-browser');
    const sent = await sendEnquiry(
      services,
      null,
      sender,
      enquiry({ email: ' New.Guest@Example.org ', uploads: [file] }),
    );
    expect(sent).toMatchObject({ ok: true, value: { confirmed: false, email: 'new.guest@example.org' } });
    if (!sent.ok) return;
    const { ref } = sent.value;
    expect((await commission(setting, ref)).confirmedAt).toBeNull();
    expect(await letters(setting, ref)).toEqual([]);
    const asked = await services.db
      .select()
      .from(mails)
      .where(and(eq(mails.letter, 'M0'), eq(mails.to, 'new.guest@example.org')));
    expect(asked).toHaveLength(1);
    expect(asked[0]!.data).toMatchObject({ enquiry: { ref } });
    expect(await waitingEnquiry(services, 'guest-browser', ref)).toMatchObject({ ref });
    expect(await waitingEnquiry(services, 'another-browser', ref)).toBeNull();

    const user = { id: setting.other.id, email: 'new.guest@example.org' };
    const confirm = () => services.db.transaction((tx) => confirmEnquiries(tx, user, START));
    expect(await confirm()).toEqual([ref]);
    expect(await confirm()).toEqual([]);
    expect(await letters(setting, ref)).toEqual(['M1 to new.guest@example.org', 'M2 to wren@example.org']);
    expect(await commission(setting, ref)).toMatchObject({ customerId: user.id, confirmedAt: START });
    const [row] = await services.db.select().from(uploads).where(eq(uploads.id, file));
    expect(row).toMatchObject({ ownerId: user.id, commissionId: (await commission(setting, ref)).id });
    const lines = await services.db.select().from(events).where(eq(events.commissionId, row!.commissionId!));
    expect(lines.map((line) => line.code)).toEqual(['T1']);
  });

  it('an owner may write down for a person on the telephone', async () => {
    const { services, owner } = setting;
    const sent = await sendEnquiry(services, owner, SENDER, enquiry({ email: 'phone@example.org', adult: false }));
    expect(sent).toMatchObject({ ok: true, value: { confirmed: true } });
    const row = sent.ok ? await commission(setting, sent.value.ref) : null;
    expect(row?.customerId).not.toBe(owner.id);
  });

  it('refuses files that another browser sent, and keeps nothing then', async () => {
    const { services, customer } = setting;
    const theirs = await upload('somebody-else');
    const input = enquiry({ uploads: [theirs] });
    const refused = await sendEnquiry(services, customer, SENDER, input);
    expect(refused).toMatchObject({ ok: false, problem: { code: 'invalid', fields: { uploads: expect.any(String) } } });
    const [row] = await services.db.select().from(uploads).where(eq(uploads.id, theirs));
    expect(row?.commissionId).toBeNull();
    const corrected = await sendEnquiry(services, customer, SENDER, { ...input, uploads: [] });
    expect(corrected.ok).toBe(true);
  });

  it('refuses a blade without the declaration of age', async () => {
    const refused = await sendEnquiry(setting.services, null, SENDER, enquiry({ adult: false }));
    expect(refused).toMatchObject({ ok: false, problem: { fields: { adult: expect.stringContaining('18') } } });
  });

  it('refuses a piece that is to be unmarked and look old, and says why', async () => {
    const wish = 'Please leave off any mark and make it look aged, as if it had been dug up.';
    const refused = await sendEnquiry(setting.services, null, SENDER, enquiry({ wish }));
    expect(refused).toMatchObject({ ok: false, problem: { fields: { wish: expect.stringContaining('antiquity') } } });
  });

  it('refuses makers and the bookkeeper', async () => {
    const { services, maker, bookkeeper } = setting;
    for (const actor of [maker, bookkeeper]) {
      expect(codeOf(await sendEnquiry(services, actor, SENDER, enquiry()))).toBe('not-allowed');
    }
  });

  it('is slowed when very many come from one address', async () => {
    const sender = { browserId: 'eager', client: '192.0.2.99' };
    const send = () => sendEnquiry(setting.services, setting.other, sender, enquiry());
    for (let count = 0; count < 12; count += 1) expect(codeOf(await send())).toBe('ok');
    expect(codeOf(await send())).toBe('too-many');
  });

  it('refuses another browser’s number for its own', async () => {
    const { services } = setting;
    const input = enquiry({ email: 'first@example.org' });
    await sendEnquiry(services, null, { browserId: 'first', client: '192.0.2.20' }, input);
    const second = await sendEnquiry(services, null, { browserId: 'second', client: '192.0.2.21' }, input);
    expect(codeOf(second)).toBe('conflict');
  });
});

describe('the enquiry’s schema', () => {
  const base = { ...enquiry(), licence: undefined };
  const complaints = (changes: Record<string, unknown>) => {
    const parsed = enquirySchema.safeParse({ ...base, ...changes });
    return parsed.success ? [] : parsed.error.issues.map((issue) => issue.path.join('.'));
  };

  it('reads a plain form’s text', () => {
    const parsed = enquirySchema.parse({ ...base, adult: 'yes', consent: 'on', budget: '1,500', uploads: '' });
    expect(parsed).toMatchObject({ adult: true, consent: true, budget: 1500, uploads: [] });
  });

  it.each([
    [{ website: 'https://spam.example' }, 'website'],
    [{ mark: 'none' }, 'mark'],
    [{ consent: 'no' }, 'consent'],
    [{ neededBy: 'date' }, 'neededByDate'],
    [{ neededBy: 'season', neededBySeason: ' ' }, 'neededBySeason'],
    [{ designSource: 'internet' }, 'licence'],
    [{ designSource: 'museum-scan' }, 'rightsNote'],
    [{ email: 'nobody' }, 'email'],
    [{ wish: 'x' }, 'wish'],
    [{ budget: '12.50' }, 'budget'],
    [{ form: '' }, 'form'],
    [{ uploads: ['1'] }, 'uploads.0'],
  ])('refuses %o at its field', (changes, field) => {
    expect(complaints(changes)).toContain(field);
  });
});
