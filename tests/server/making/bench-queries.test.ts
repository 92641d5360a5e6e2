import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, it, vi } from 'vitest';
import { commissions } from '../../../src/server/db/schema/commissions';
import { listBench } from '../../../src/server/making/bench-view';
import { commission, newEnquiry, openSetting, type Setting } from '../deal/deal-setting';

let setting: Setting;
beforeAll(async () => {
  setting = await openSetting();
});
afterAll(() => setting.drop());

async function atTheBench(): Promise<void> {
  const ref = await newEnquiry(setting);
  const { id } = await commission(setting, ref);
  await setting.services.db.update(commissions).set({ deal: 'making' }).where(eq(commissions.id, id));
}

async function queriesOfTheList(): Promise<number> {
  const query = vi.spyOn(setting.services.pool, 'query');
  const list = await listBench(setting.services, setting.maker);
  const asked = query.mock.calls.length;
  query.mockRestore();
  expect(list.ok).toBe(true);
  return asked;
}

// OWASP ASVS 5.0, 15.2.2: what a page asks of the database does not grow with what it shows.
it('the bench asks as much of the database for eight commissions as for one', async () => {
  await atTheBench();
  const forOne = await queriesOfTheList();
  for (let more = 0; more < 7; more += 1) await atTheBench();
  expect(forOne).toBeGreaterThan(0);
  expect(await queriesOfTheList()).toBe(forOne);
});
