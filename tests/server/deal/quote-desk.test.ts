import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { deskSchema } from '../../../src/commission/pricing/desk';
import { deskFields } from '../../../src/commission/pricing/desk-fields';
import { swordFromFile } from '../../../src/demo/drafts';
import { openDesk, repriceDraft, saveDraft } from '../../../src/server/quote/quote-desk';
import { sendQuote, withdrawQuote } from '../../../src/server/quote/quotes';
import { codeOf, commission, deskOf, newEnquiry, openSetting, putDraft, typedOver, type Setting } from './deal-setting';

let setting: Setting;
beforeAll(async () => {
  setting = await openSetting();
});
afterAll(() => setting.drop());

describe('the quote desk', () => {
  it('shows and reads back every figure of a draft without changing one', () => {
    const draft = {
      ...swordFromFile(),
      price: { kind: 'own' as const, workMinor: 230_000, reason: 'Known customer.' },
    };
    expect(typedOver(draft)).toEqual(draft);
  });

  it('opens with the estimate’s own draft and the range the customer was shown', async () => {
    const { services, owner } = setting;
    const ref = await newEnquiry(setting);
    const desk = await openDesk(services, owner, ref);
    const { rangeMinor } = (await commission(setting, ref)).estimate as { rangeMinor: { low: number; high: number } };
    expect(desk).toMatchObject({ ok: true, value: { version: 0, revision: 1 } });
    expect(desk.ok && desk.value.draft.shownRange).toEqual({ lowMinor: rangeMinor.low, highMinor: rangeMinor.high });
  });

  it('saves over the version it read, and never over another window’s', async () => {
    const { services, owner } = setting;
    const ref = await newEnquiry(setting);
    const desk = await openDesk(services, owner, ref);
    if (!desk.ok) throw new Error(desk.problem.message);
    const { draft } = desk.value;
    const first = deskOf({ ...draft, title: 'First window' }, 0);
    const second = deskOf({ ...draft, title: 'Second window' }, 0);
    expect(await saveDraft(services, owner, ref, first)).toEqual({ ok: true, value: { version: 1, revision: 1 } });
    expect(await saveDraft(services, owner, ref, first)).toEqual({ ok: true, value: { version: 1, revision: 1 } });
    expect(codeOf(await saveDraft(services, owner, ref, second))).toBe('stale');
    expect(codeOf(await saveDraft(services, owner, ref, { ...second, version: 1 }))).toBe('ok');
  });

  it('lets the metal lines follow the masses without scripts too, unless an amount was typed over', async () => {
    const { services, owner } = setting;
    const ref = await newEnquiry(setting);
    const before = swordFromFile();
    await putDraft(setting, ref, { ...before, termsVersion: '2026-1' });
    const amounts = async () => {
      const desk = await openDesk(services, owner, ref);
      if (!desk.ok) throw new Error(desk.problem.message);
      const { lines } = desk.value.draft;
      return Object.fromEntries(lines.map((line) => [line.id, line.materialsMinor] as const));
    };
    const typed = { ...deskOf(before, 1), castMassG: 900, pouredMassG: 1680 };
    expect(codeOf(await saveDraft(services, owner, ref, typed))).toBe('ok');
    // The specification, 4.1, 4.2: 146.00 x 1,680 / 8,400; 43 g at 14.60; 780 g at 4.80; 900 g at 14.60 per kg.
    const followed = { heat: 2920, 'melt-loss': 63, gating: 374, metal: 1314 };
    expect(await amounts()).toMatchObject(followed);
    const lines = typed.lines.map((line) => ({
      ...line,
      materialsMinor: { ...followed, metal: 2000 }[line.id as keyof typeof followed] ?? line.materialsMinor,
    }));
    expect(codeOf(await saveDraft(services, owner, ref, { ...typed, lines, pouredMassG: 1600, version: 2 }))).toBe(
      'ok',
    );
    // 146.00 x 1,600 / 8,400; 41 g; 700 g; and the owner's own 20.00.
    expect(await amounts()).toMatchObject({ heat: 2781, 'melt-loss': 60, gating: 336, metal: 2000 });
  });

  it('takes alloy, currency, tax and rush as chosen, keeps them at today’s rates, and refuses what is not offered', async () => {
    const { services, owner } = setting;
    const ref = await newEnquiry(setting);
    const before = swordFromFile();
    await putDraft(setting, ref, { ...before, termsVersion: '2026-1' });
    const chosen = {
      ...deskOf(before, 1),
      alloy: 'TB90',
      currency: 'EUR' as const,
      tax: 'export' as const,
      rush: true,
    };
    expect(await saveDraft(services, owner, ref, { ...chosen, alloy: 'XX1' })).toMatchObject({
      problem: { code: 'invalid', fields: { alloy: expect.stringContaining('does not cast') } },
    });
    expect(codeOf(await saveDraft(services, owner, ref, chosen))).toBe('ok');
    const kept = {
      metal: { code: 'TB90', ingotMinorPerKg: 1380 },
      currency: { quoted: 'EUR', rate: 1.17, buffer: 0.02 },
      tax: { kind: 'export' },
      rush: { heatMinor: 14_600, heats: 1 },
    };
    const draft = async () => {
      const desk = await openDesk(services, owner, ref);
      if (!desk.ok) throw new Error(desk.problem.message);
      return desk.value.draft;
    };
    expect(await draft()).toMatchObject(kept);
    expect((await draft()).specification[0]).toBe('Tin bronze, 90/10, cast in one piece');
    expect(codeOf(await repriceDraft(services, owner, ref, { version: 2 }))).toBe('ok');
    expect(await draft()).toMatchObject(kept);
  });

  it('reads a plain form: hours and whole units, a blank row and a row left out', () => {
    const draft = swordFromFile();
    const { lines, rush: _unticked, ...fields } = deskFields(draft, 3);
    const typed: Record<string, string> = { ...fields, margin: '25' };
    lines.forEach((line, index) => {
      for (const [name, value] of Object.entries(line)) typed[`lines.${index}.${name}`] = String(value);
    });
    typed['lines.0.drop'] = 'yes';
    typed['lines.1.minutes'] = '2,5';
    typed['lines.1.materialsMinor'] = '1,234.50';
    const desk = deskSchema.parse(typed);
    expect(desk.lines).toHaveLength(draft.lines.length - 1);
    expect(desk.lines[0]).toMatchObject({ minutes: 150, materialsMinor: 123_450 });
    expect(desk).toMatchObject({ version: 3, margin: 0.25 });
    const wrong = deskSchema.safeParse({ ...typed, 'lines.2.minutes': 'two' });
    expect(wrong.success ? [] : wrong.error.issues.map((issue) => issue.path.join('.'))).toContain('lines.2.minutes');
  });

  it('is the owners’ alone', async () => {
    const ref = await newEnquiry(setting);
    const { services, customer, other, maker, bookkeeper } = setting;
    for (const actor of [customer, other, maker, bookkeeper, null]) {
      expect(codeOf(await openDesk(services, actor, ref))).not.toBe('ok');
      expect(codeOf(await saveDraft(services, actor, ref, deskOf(swordFromFile(), 0)))).not.toBe('ok');
      expect(codeOf(await sendQuote(services, actor, ref, { version: 1, revision: 1, freeze: true }))).not.toBe('ok');
      expect(codeOf(await withdrawQuote(services, actor, ref, 1, {}))).not.toBe('ok');
    }
  });
});
