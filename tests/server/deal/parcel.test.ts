import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { parcelAddressSchema } from '../../../src/commission/parcel-address';
import { addCommissionFile } from '../../../src/server/enquiry/commission-files';
import { commissions, events, uploads } from '../../../src/server/db/schema/commissions';
import { setParcelAddress } from '../../../src/server/making/parcel-address';
import { commission, newEnquiry, openSetting, type Setting } from './deal-setting';

let setting: Setting;
let ref: string;
const address = parcelAddressSchema.parse({
  lines: '3 Sluice Row\n\n Ostrey Quay ',
  country: 'gb',
  phone: '01632 960001',
});

beforeAll(async () => {
  setting = await openSetting();
  ref = await newEnquiry(setting);
});
afterAll(() => setting.drop());

function fileRequest(clientId: string, name: string, body: string): Request {
  const form = new FormData();
  form.set('clientId', clientId);
  form.set('file', new File([body], name));
  return new Request('http://localhost/api', { method: 'POST', body: form });
}
const STEP = 'ISO-10303-21;\nHEADER;\nENDSEC;\nEND-ISO-10303-21;\n';

describe('the address of a parcel', () => {
  test('is read line by line, and needs two of them, a country and a telephone number', () => {
    expect(address).toEqual({ lines: ['3 Sluice Row', 'Ostrey Quay'], country: 'GB', phone: '01632 960001' });
    const poor = parcelAddressSchema.safeParse({ lines: 'one line', country: 'Britain', phone: '' });
    expect(poor.error?.issues.map((issue) => issue.path.join('.')).sort()).toEqual(['country', 'lines', 'phone']);
  });

  test('is kept with one line of history, however often it is sent', async () => {
    for (let press = 0; press < 3; press++) {
      expect(await setParcelAddress(setting.services, setting.customer, ref, address)).toMatchObject({ ok: true });
    }
    const row = await commission(setting, ref);
    expect(row.shipping).toEqual(address);
    const lines = await setting.services.db.select().from(events).where(eq(events.commissionId, row.id));
    expect(lines.filter((line) => line.code === 'address')).toHaveLength(1);
  });

  test('in another country than the price was worked out for is a change to talk about', async () => {
    const outcome = await setParcelAddress(setting.services, setting.customer, ref, { ...address, country: 'DK' });
    expect(outcome).toMatchObject({
      ok: false,
      problem: { code: 'conflict', fields: { country: expect.any(String) } },
    });
  });

  test('of somebody else’s commission can neither be seen nor set', async () => {
    expect(await setParcelAddress(setting.services, setting.other, ref, address)).toMatchObject({
      problem: { code: 'not-found' },
    });
    expect(await setParcelAddress(setting.services, setting.maker, ref, address)).toMatchObject({
      problem: { code: 'not-allowed' },
    });
  });

  test('cannot change once the parcel has left', async () => {
    const { db } = setting.services;
    await db.update(commissions).set({ deal: 'sent' }).where(eq(commissions.ref, ref));
    expect(await setParcelAddress(setting.services, setting.customer, ref, address)).toMatchObject({
      problem: { code: 'conflict' },
    });
    await db.update(commissions).set({ deal: 'enquiry' }).where(eq(commissions.ref, ref));
  });
});

describe('one more file for a commission', () => {
  const send = (who: Setting['customer'], clientId: string, name = 'hilt.step', body = STEP) =>
    addCommissionFile(setting.services, who, 'a-browser', ref, fileRequest(clientId, name, body));

  test('goes with the commission at once, and only once for one number', async () => {
    const first = await send(setting.customer, 'file-0001');
    const second = await send(setting.customer, 'file-0001');
    expect(first).toMatchObject({ ok: true, value: { kind: 'step', name: 'hilt.step' } });
    expect(second).toMatchObject({ ok: true });
    const row = await commission(setting, ref);
    const kept = await setting.services.db.select().from(uploads).where(eq(uploads.commissionId, row.id));
    expect(kept.map((file) => [file.displayName, file.ownerId])).toEqual([['hilt.step', setting.customer.id]]);
    const lines = await setting.services.db.select().from(events).where(eq(events.commissionId, row.id));
    expect(lines.filter((line) => line.code === 'file')).toHaveLength(1);
  });

  test('of a kind the studio does not take is refused and leaves nothing', async () => {
    expect(await send(setting.customer, 'file-0002', 'page.step', '<svg onload="alert(1)"/>')).toMatchObject({
      ok: false,
      problem: { code: 'unsupported' },
    });
    expect(await setting.services.db.select().from(uploads).where(eq(uploads.clientId, 'file-0002'))).toEqual([]);
  });

  test('cannot be put with somebody else’s commission', async () => {
    expect(await send(setting.other, 'file-0003')).toMatchObject({ problem: { code: 'not-found' } });
  });
});
