import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { acceptSchema } from '../../../src/commission/enquiry/triage';
import { acceptances, quotes } from '../../../src/server/db/schema/quotes';
import { lapseDeposits } from '../../../src/server/jobs/clock';
import { readBalance } from '../../../src/server/money/ledger';
import { acceptQuote } from '../../../src/server/quote/acceptance';
import { sendQuote } from '../../../src/server/quote/quotes';
import { agreed } from '../../factories/paying-studio';
import { commission, openSetting, type Setting } from '../deal/deal-setting';

const DAY = 24 * 60 * 60_000;
let setting: Setting;
let ref: string;

beforeAll(async () => {
  setting = await openSetting();
  ref = await agreed(setting);
});
afterAll(() => setting.drop());

test('an agreement without its first payment lapses, and its quote with it', async () => {
  setting.clock.now = new Date(setting.clock.now.getTime() + 5 * DAY);
  await lapseDeposits(setting.services); // the reminder comes first
  setting.clock.now = new Date(setting.clock.now.getTime() + 6 * DAY);
  await lapseDeposits(setting.services);
  const row = await commission(setting, ref);
  expect(row.deal).toBe('lapsed');
  const [quote] = await setting.services.db.select().from(quotes).where(eq(quotes.commissionId, row.id));
  expect(quote?.state).toBe('lapsed');
  expect((await readBalance(setting.services.db, row.id, setting.clock.now)).toComeMinor).toBe(0);
});

test('it can be priced again, accepted again, and keeps the evidence of both acceptances', async () => {
  const revived = { version: 1, revision: 2, freeze: true as const };
  expect(await sendQuote(setting.services, setting.owner, ref, revived)).toMatchObject({
    ok: true,
    value: { revision: 2 },
  });
  const yes = { typedName: 'Isolde Wintermere', terms: 'yes', bespoke: 'yes', mark: 'yes', adult: 'yes' };
  const first = acceptSchema.parse({ ...yes, revision: '1' });
  const second = acceptSchema.parse({ ...yes, revision: '2' });
  expect(await acceptQuote(setting.services, setting.customer, ref, first, '192.0.2.7')).toMatchObject({ ok: false });
  expect(await acceptQuote(setting.services, setting.customer, ref, second, '192.0.2.7')).toMatchObject({ ok: true });
  const row = await commission(setting, ref);
  expect(row.deal).toBe('agreed');
  const kept = await setting.services.db.select().from(acceptances).where(eq(acceptances.commissionId, row.id));
  expect(kept).toHaveLength(2);
});

test('a lapsed or withdrawn quote never comes back into force', async () => {
  const row = await commission(setting, ref);
  const first = setting.services.db
    .select()
    .from(quotes)
    .where(eq(quotes.commissionId, row.id))
    .orderBy(quotes.revision);
  const [lapsed] = await first;
  await expect(
    setting.services.db.update(quotes).set({ state: 'sent' }).where(eq(quotes.id, lapsed!.id)),
  ).rejects.toThrow();
});
