import { mkdirSync, mkdtempSync, readFileSync, rmSync, utimesSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { uuidv7 } from 'uuidv7';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { estimate } from '../../../src/commission/pricing/estimate';
import { estimateRequestSchema } from '../../../src/commission/pricing/estimate-request';
import { applyRates, ratesFields, ratesFormSchema } from '../../../src/commission/pricing/rates-form';
import { demoRates } from '../../../src/demo/rates';
import { attempts } from '../../../src/server/db/schema/making';
import { currentRateCard, currentRates, listRates, setRates } from '../../../src/server/pricing/rates';
import { codeOf, commission, newEnquiry, openSetting, START, type Setting } from './deal-setting';

let setting: Setting;
beforeAll(async () => {
  setting = await openSetting();
});
afterAll(() => setting.drop());

describe('the rates form', () => {
  it('shows and reads back every figure without changing one', () => {
    const form = ratesFormSchema.parse(ratesFields(demoRates, START));
    expect(applyRates(demoRates, form)).toEqual(demoRates);
  });

  it('refuses factors that fall and shares beyond their bounds, each at its field', () => {
    const typed = { ...ratesFields(demoRates, START), 'families.0.p10': '2', 'alloys.0.meltLoss': '40', margin: '95' };
    const parsed = ratesFormSchema.safeParse(typed);
    const fields = parsed.success ? [] : parsed.error.issues.map((issue) => issue.path.join('.'));
    expect(fields).toEqual(expect.arrayContaining(['alloys.0.meltLoss', 'margin']));
    const falling = ratesFormSchema.safeParse({ ...ratesFields(demoRates, START), 'families.0.p10': '2' });
    expect(falling.success ? [] : falling.error.issues.map((issue) => issue.path.join('.'))).toEqual([
      'families.0.p50',
    ]);
  });
});

describe('a new version of the rates', () => {
  it('comes into force for one of two owners at once; the other is told', async () => {
    const { services, owner, clock } = setting;
    clock.now = new Date(START.getTime() + 60_000);
    const typed = (bench: string) =>
      ratesFormSchema.parse({ ...ratesFields(demoRates, START), benchRateMinorPerHour: bench });
    const saved = await Promise.all([
      setRates(services, owner, typed('39.00')),
      setRates(services, owner, typed('41.00')),
    ]);
    expect(saved.map(codeOf).sort()).toEqual(['ok', 'stale']);
    const rates = await currentRates(services.db);
    expect([3900, 4100]).toContain(rates.benchRateMinorPerHour);
    expect(rates.version).not.toBe(demoRates.version);
    const versions = await listRates(services, owner);
    expect(versions.ok && versions.value).toHaveLength(2);
  });

  it('is set and seen by owners alone', async () => {
    const { services, customer, maker, bookkeeper } = setting;
    const form = ratesFormSchema.parse(ratesFields(demoRates, START));
    for (const actor of [customer, maker, bookkeeper, null]) {
      expect(codeOf(await setRates(services, actor, form))).toBe('not-allowed');
      expect(codeOf(await listRates(services, actor))).toBe('not-allowed');
    }
  });
});

describe('the studio’s own pours', () => {
  it('change the price at once: a scrapped casting makes the next one dearer, its version says how many are counted', async () => {
    const { services } = setting;
    const ref = await newEnquiry(setting);
    const request = estimateRequestSchema.parse({ form: 'leaf-shaped-sword' });
    const price = async () => {
      const card = await currentRateCard(services);
      const found = estimate(request, card);
      return { from: found.ok ? found.value.fromMinor : 0, version: card.rates.version };
    };
    const before = await price();
    const commissionId = (await commission(setting, ref)).id;
    const pour = (number: number, result: 'sound' | 'scrapped') => ({
      id: uuidv7(),
      commissionId,
      number,
      family: 'thin',
      result,
      mouldAt: START,
      closedAt: new Date(START.getTime() + 3_600_000),
    });
    await services.db.insert(attempts).values([1, 2, 3, 4].map((number) => pour(number, 'scrapped')));
    const after = await price();
    expect(after.from).toBeGreaterThan(before.from);
    expect(after.version).toBe(`${before.version}+4`);
    await services.db.insert(attempts).values([5, 6, 7, 8, 9, 10].map((number) => pour(number, 'sound')));
    expect((await price()).from).toBeLessThan(after.from);
  });
});

describe('the forms of the rate card', () => {
  it('are read again when a file changes', async () => {
    const folder = mkdtempSync(join(tmpdir(), 'pourwright-forms-'));
    mkdirSync(join(folder, 'forms'));
    const path = join(folder, 'forms', 'palstave.json');
    const form = JSON.parse(readFileSync('src/content/forms/palstave.json', 'utf8')) as { name: string };
    writeFileSync(path, JSON.stringify(form));
    const reader = { db: setting.services.db, config: { ...setting.services.config, contentFolder: folder } };
    expect((await currentRateCard(reader)).forms.map((each) => each.name)).toEqual([form.name]);
    writeFileSync(path, JSON.stringify({ ...form, name: 'Palstave, renamed' }));
    utimesSync(path, new Date('2030-01-01'), new Date('2030-01-01'));
    expect((await currentRateCard(reader)).forms.map((each) => each.name)).toEqual(['Palstave, renamed']);
    rmSync(folder, { recursive: true });
  });
});
