import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { acceptQuote } from '../../../src/server/quote/acceptance';
import { sendEnquiry } from '../../../src/server/enquiry/enquiries';
import { sendMessage } from '../../../src/server/enquiry/messages';
import { listCustomerCommissions, readCustomerCommission } from '../../../src/server/views/customer-commission';
import { readOwnerCommission } from '../../../src/server/views/owner-commission';
import { readEnquiries, readTurnList } from '../../../src/server/views/turn-list';
import { codeOf, enquiry, newEnquiry, openSetting, sentQuote, START, type Setting } from './deal-setting';

let setting: Setting;
let refs: { waiting: string; quoted: string; agreed: string; guest: string };

beforeAll(async () => {
  setting = await openSetting();
  const { services, customer } = setting;
  const waiting = await newEnquiry(setting);
  const quoted = await newEnquiry(setting);
  await sentQuote(setting, quoted);
  const agreed = await newEnquiry(setting);
  await sentQuote(setting, agreed);
  const yes = { revision: 1, typedName: 'Isolde Wintermere', terms: true, bespoke: true, mark: true, adult: true };
  await acceptQuote(services, customer, agreed, yes, '192.0.2.5');
  await sendMessage(services, customer, quoted, { clientId: 'message-0001', body: 'May I think about it?' });
  const sent = await sendEnquiry(
    services,
    null,
    { browserId: 'guest', client: '192.0.2.77' },
    enquiry({ email: 'guest@example.org' }),
  );
  if (!sent.ok) throw new Error(sent.problem.message);
  refs = { waiting, quoted, agreed, guest: sent.value.ref };
});
afterAll(() => setting.drop());

describe('the studio’s list', () => {
  it('has each confirmed commission where it waits, with how long and what for', async () => {
    setting.clock.now = new Date(START.getTime() + 2 * 86_400_000);
    const lists = await readTurnList(setting.services, setting.owner);
    setting.clock.now = START;
    if (!lists.ok) throw new Error(lists.problem.message);
    const short = (list: typeof lists.value.studio) =>
      list.map((line) => [line.ref, line.turn.studioSentence, line.days, line.messageAt !== null]);
    expect(short(lists.value.studio)).toEqual([
      [refs.waiting, 'Enquiry to answer', 2, false],
      [refs.quoted, 'Quote, lapses in 28 days', 2, true],
    ]);
    expect(short(lists.value.customer)).toEqual([[refs.agreed, 'Deposit, lapses in 5 days', 2, false]]);
    expect(JSON.stringify(lists.value)).not.toContain(refs.guest);
  });

  it('passes the turn back to the customer once their message is answered', async () => {
    const { services, owner } = setting;
    await sendMessage(services, owner, refs.quoted, { clientId: 'message-0002', body: 'Of course.' });
    const lists = await readTurnList(services, owner);
    if (!lists.ok) throw new Error(lists.problem.message);
    expect(lists.value.studio.map((line) => line.ref)).toEqual([refs.waiting]);
    expect(lists.value.customer.map((line) => line.ref)).toContain(refs.quoted);
  });

  it('of enquiries leaves out what is agreed', async () => {
    const lines = await readEnquiries(setting.services, setting.owner);
    expect(lines.ok && lines.value.map((line) => line.ref)).toEqual([refs.waiting, refs.quoted]);
  });

  it('is the owners’ alone, as is the whole of a commission', async () => {
    const { services, customer, other, maker, bookkeeper } = setting;
    for (const actor of [customer, other, maker, bookkeeper, null]) {
      expect(codeOf(await readTurnList(services, actor))).not.toBe('ok');
      expect(codeOf(await readEnquiries(services, actor))).not.toBe('ok');
      expect(codeOf(await readOwnerCommission(services, actor, refs.agreed))).not.toBe('ok');
    }
  });
});

describe('a customer', () => {
  it('lists their own commissions and nobody else’s', async () => {
    const { services, customer, other } = setting;
    const own = await listCustomerCommissions(services, customer);
    expect(own.ok && own.value.map((line) => line.ref).sort()).toEqual([refs.waiting, refs.quoted, refs.agreed].sort());
    expect(await listCustomerCommissions(services, other)).toEqual({ ok: true, value: [] });
    expect(codeOf(await listCustomerCommissions(services, null))).toBe('sign-in-needed');
  });

  it('gets the same answer for somebody else’s commission as for one that does not exist', async () => {
    const { services, other } = setting;
    const theirs = await readCustomerCommission(services, other, refs.agreed);
    const none = await readCustomerCommission(services, other, 'MF-9999');
    expect(theirs).toEqual(none);
  });

  it('reads no address, author’s mail or studio-only line', async () => {
    const view = await readCustomerCommission(setting.services, setting.customer, refs.quoted);
    if (!view.ok) throw new Error(view.problem.message);
    const text = JSON.stringify(view.value);
    expect(text).not.toContain('wren@example.org');
    expect(view.value.history.every((line) => line.public)).toBe(true);
    expect(Object.keys(view.value)).not.toContain('row');
  });
});
