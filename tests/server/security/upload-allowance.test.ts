import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { uuidv7 } from 'uuidv7';
import { POST } from '../../../src/pages/api/uploads/index';
import { uploads } from '../../../src/server/db/schema/commissions';
import { addCommissionFile } from '../../../src/server/enquiry/commission-files';
import { limitUpload, takeUpload } from '../../../src/server/uploads/limit-upload';
import { commission, newEnquiry, openSetting, START, type Setting } from '../deal/deal-setting';
import { Browser } from '../auth/knock';

const MB = 1024 * 1024;
const STEP = 'ISO-10303-21;\nHEADER;\nENDSEC;\nEND-ISO-10303-21;\n';
let setting: Setting;
beforeAll(async () => {
  setting = await openSetting();
});
afterAll(() => setting.drop());

function file(clientId: string, length?: number): Request {
  const body = new FormData();
  body.set('clientId', clientId);
  body.set('file', new File([STEP], 'hilt.step'));
  const headers = new Headers(length === undefined ? [] : [['content-length', `${length}`]]);
  return new Request('http://localhost/', { method: 'POST', body, headers });
}
const codes = async (outcomes: Promise<{ ok: boolean; problem?: { code: string } }>[]) =>
  (await Promise.all(outcomes)).map((outcome) => outcome.problem?.code ?? 'ok');

// OWASP ASVS 5.0, 5.2.4: nobody fills the disk with too many files, or with too large ones.
describe('what one network may send in an hour', () => {
  it('is four hundred small files, whatever browser they seem to come from', async () => {
    const { services } = setting;
    const send = (index: number) =>
      takeUpload(services, null, { browserId: `browser-${index}`, client: '192.0.2.20' }, file(`file-${index}`));
    for (let sent = 0; sent < 399; sent += 1) await limitUpload(services, '192.0.2.20', file('any-file'));
    expect(await codes([send(1)])).toEqual(['ok']);
    expect(await codes([send(2), send(3)])).toEqual(['too-many', 'too-many']);
  });

  it('is some gigabytes of large ones, by the size they say they have', async () => {
    const large = () => limitUpload(setting.services, '192.0.2.21', file('large', 200 * MB));
    const outcomes = await codes(Array.from({ length: 20 }, large));
    expect(outcomes.filter((code) => code === 'ok')).toHaveLength(19);
    expect(outcomes.filter((code) => code === 'too-many')).toHaveLength(1);
  });

  it('is said in JSON, as every answer to an upload', async () => {
    for (let sent = 0; sent < 10; sent += 1) await limitUpload(setting.services, '192.0.2.22', file('x', 500 * MB));
    const answer = await new Browser(setting.services, '192.0.2.22').post(POST, {});
    expect(answer.status).toBe(429);
    expect(((await answer.json()) as { problem: { message: string } }).problem.message).toMatch(/Try again in \d+ min/);
  });
});

describe('what one commission may hold', () => {
  it('is a hundred and twenty files', async () => {
    const ref = await newEnquiry(setting);
    const { id } = await commission(setting, ref);
    const row = (index: number) => ({
      id: uuidv7(),
      clientId: `held-${index}`,
      browserId: 'a-browser',
      commissionId: id,
      kind: 'step' as const,
      displayName: 'hilt.step',
      mime: 'model/step',
      bytes: 1,
      sha256: '0'.repeat(64),
      storageKey: `uploads/00/${uuidv7()}.step`,
      createdAt: START,
    });
    const send = (clientId: string) =>
      addCommissionFile(setting.services, setting.customer, 'a-browser', ref, file(clientId));
    await setting.services.db.insert(uploads).values(Array.from({ length: 119 }, (_, index) => row(index)));
    expect(await codes([send('file-0120')])).toEqual(['ok']);
    expect(await codes([send('file-0121')])).toEqual(['too-many']);
  });
});
