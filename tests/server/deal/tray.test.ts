import { afterAll, beforeAll, expect, it } from 'vitest';
import { uuidv7 } from 'uuidv7';
import { tray } from '../../../src/server/db/schema/commissions';
import { readTray } from '../../../src/server/tray';
import { commission, newEnquiry, openSetting, START, type Setting } from './deal-setting';

let setting: Setting;
beforeAll(async () => {
  setting = await openSetting();
});
afterAll(() => setting.drop());

async function layInTray(ref: string | null): Promise<string> {
  const id = uuidv7();
  const commissionId = ref ? (await commission(setting, ref)).id : null;
  const problem = { code: 'unavailable' as const, message: 'A mail did not arrive. Check the address by phone.' };
  await setting.services.db.insert(tray).values({ id, commissionId, problem, data: {}, createdAt: START });
  return id;
}

it('says whom to ring, and on which number', async () => {
  const rung = await layInTray(await newEnquiry(setting, { phone: '+44 20 7946 0958' }));
  const silent = await layInTray(await newEnquiry(setting));
  const nobody = await layInTray(null);
  const read = await readTray(setting.services, setting.owner);
  const customers = new Map(read.ok ? read.value.map((item) => [item.id, item.customer]) : []);
  expect(customers.get(rung)).toEqual({ name: 'Isolde Wintermere', phone: '+44 20 7946 0958' });
  expect(customers.get(silent)).toEqual({ name: 'Isolde Wintermere', phone: null });
  expect(customers.get(nobody)).toBeNull();
});
