import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { answersSchema, askSchema } from '../../../src/commission/enquiry/checklist';
import { declineSchema, sendEstimateSchema } from '../../../src/commission/enquiry/triage';
import { mails } from '../../../src/server/db/schema/studio';
import { sendMessage } from '../../../src/server/enquiry/messages';
import { answerQuestions, askQuestions, readQuestions } from '../../../src/server/enquiry/questions';
import { recordRights } from '../../../src/server/enquiry/rights';
import { declineEnquiry, sendEstimate } from '../../../src/server/enquiry/triage';
import { buyerTermsSchema } from '../../../src/commission/enquiry/buyer-terms';
import { acceptSchema } from '../../../src/commission/enquiry/triage';
import { setBuyerTerms } from '../../../src/server/enquiry/buyer-terms';
import { readBalance } from '../../../src/server/money/ledger';
import { acceptQuote } from '../../../src/server/quote/acceptance';
import { readOwnerCommission } from '../../../src/server/views/owner-commission';
import { codeOf, commission, letters, newEnquiry, openSetting, sentQuote, type Setting } from './deal-setting';

let setting: Setting;
beforeAll(async () => {
  setting = await openSetting();
});
afterAll(() => setting.drop());

const QUESTIONS = askSchema.parse({
  'questions.0.text': 'Which wood should the grip have?',
  'questions.0.why': 'The rivets are set to its thickness.',
  'questions.1.text': '',
  'questions.1.why': '',
  'questions.2.text': 'Is there a weight you hope for?',
  'questions.2.why': 'We promise a mass within a margin.',
});

async function asking() {
  const ref = await newEnquiry(setting);
  const asked = await askQuestions(setting.services, setting.owner, ref, QUESTIONS);
  expect(asked).toEqual({ ok: true, value: { round: 1 } });
  const questions = await readQuestions(setting.services.db, (await commission(setting, ref)).id);
  return { ref, ids: questions.map((question) => question.id) };
}

describe('T2, questions', () => {
  it('move the enquiry to asking, mail M3 once, and asked again they are the same round', async () => {
    const { ref, ids } = await asking();
    expect(ids).toHaveLength(2);
    expect((await commission(setting, ref)).deal).toBe('asking');
    expect(await askQuestions(setting.services, setting.owner, ref, QUESTIONS)).toEqual({
      ok: true,
      value: { round: 1 },
    });
    expect((await letters(setting, ref)).filter((letter) => letter.startsWith('M3'))).toHaveLength(1);
  });

  it('are at most five open at once', async () => {
    const { ref } = await asking();
    const four = { questions: Array.from({ length: 4 }, (_, n) => ({ text: `Question ${n}?`, why: 'It matters.' })) };
    expect(codeOf(await askQuestions(setting.services, setting.owner, ref, four))).toBe('conflict');
    expect(askSchema.safeParse({ questions: [] }).success).toBe(false);
  });

  it('may be asked by an owner alone', async () => {
    const ref = await newEnquiry(setting);
    const { services, customer, maker, bookkeeper, other } = setting;
    for (const actor of [customer, maker, bookkeeper, other, null])
      expect(codeOf(await askQuestions(services, actor, ref, QUESTIONS))).not.toBe('ok');
    expect((await commission(setting, ref)).deal).toBe('enquiry');
  });
});

describe('T3, answers', () => {
  const answers = (values: Record<string, string>, send: boolean) =>
    answersSchema.parse(
      Object.fromEntries([
        ...Object.entries(values).map(([id, value]) => [`answers.${id}`, value]),
        ['send', send ? 'send' : ''],
      ]),
    );

  it('are kept while incomplete, and refused to be sent until every one is there', async () => {
    const { services, customer } = setting;
    const { ref, ids } = await asking();
    const part = await answerQuestions(services, customer, ref, answers({ [ids[0]!]: 'Ash.' }, false));
    expect(part).toEqual({ ok: true, value: { open: 1, sent: false } });
    const early = await answerQuestions(services, customer, ref, answers({ [ids[0]!]: 'Ash, oiled.' }, true));
    expect(early).toMatchObject({
      ok: false,
      problem: { code: 'invalid', fields: { [`answers.${ids[1]}`]: expect.any(String) } },
    });
    const kept = await readQuestions(services.db, (await commission(setting, ref)).id);
    expect(kept.map((question) => question.answer)).toEqual(['Ash, oiled.', null]);
    expect((await commission(setting, ref)).deal).toBe('asking');

    const whole = answers({ [ids[1]!]: 'About 700 g.' }, true);
    expect(await answerQuestions(services, customer, ref, whole)).toEqual({ ok: true, value: { open: 0, sent: true } });
    expect((await commission(setting, ref)).deal).toBe('enquiry');
    expect(codeOf(await answerQuestions(services, customer, ref, whole))).toBe('ok');
    expect((await letters(setting, ref)).filter((letter) => letter.startsWith('M2'))).toHaveLength(2);
  });

  it('reach only the commission’s own questions, and only from its customer', async () => {
    const { services, customer, other, owner, maker } = setting;
    const mine = await asking();
    const another = await asking();
    await answerQuestions(services, customer, mine.ref, answers({ [another.ids[0]!]: 'Stray.' }, false));
    const untouched = await readQuestions(services.db, (await commission(setting, another.ref)).id);
    expect(untouched.map((question) => question.answer)).toEqual([null, null]);
    for (const actor of [other, owner, maker, null])
      expect(codeOf(await answerQuestions(services, actor, mine.ref, answers({}, true)))).not.toBe('ok');
  });
});

describe('T5, declining', () => {
  it('tells the customer why, once, and is remembered for the next enquiry of that address', async () => {
    const { services, owner } = setting;
    const ref = await newEnquiry(setting);
    const input = declineSchema.parse({ reason: 'ethics', note: '' });
    expect(codeOf(await declineEnquiry(services, owner, ref, input))).toBe('ok');
    expect(codeOf(await declineEnquiry(services, owner, ref, input))).toBe('ok');
    expect(await commission(setting, ref)).toMatchObject({ deal: 'declined', declineReason: 'ethics' });
    expect((await letters(setting, ref)).filter((letter) => letter.startsWith('M5'))).toHaveLength(1);
    const next = await readOwnerCommission(services, owner, await newEnquiry(setting));
    expect(next.ok && next.value.earlier).toContainEqual(expect.objectContaining({ ref, declineReason: 'ethics' }));
  });

  it('needs a reason and an owner, and does not fit a quoted piece', async () => {
    expect(declineSchema.safeParse({ reason: '' }).success).toBe(false);
    const ref = await newEnquiry(setting);
    for (const actor of [setting.customer, setting.maker, setting.bookkeeper])
      expect(codeOf(await declineEnquiry(setting.services, actor, ref, { reason: 'law' }))).not.toBe('ok');
  });
});

describe('T6, an estimate range', () => {
  const range = sendEstimateSchema.parse({
    lowMinor: '1,625',
    highMinor: '2370.00',
    drivers: 'The length of the blade\n\nFiling by hand',
    assumptions: 'The studio’s own pattern',
    earliestWeeks: '8',
    latestWeeks: '12',
    note: '',
  });

  it('is kept in minor units with its assumptions and mailed once with tax, as a consumer pays it', async () => {
    const { services, owner } = setting;
    const ref = await newEnquiry(setting);
    expect(codeOf(await sendEstimate(services, owner, ref, range))).toBe('ok');
    expect(codeOf(await sendEstimate(services, owner, ref, range))).toBe('ok');
    const row = await commission(setting, ref);
    expect(row).toMatchObject({ deal: 'estimated', ownerEstimate: { lowMinor: 162_500, highMinor: 237_000 } });
    const sent = await services.db.select().from(mails).where(eq(mails.commissionId, row.id));
    const letter = sent.filter((mail) => mail.letter === 'M6');
    expect(letter).toHaveLength(1);
    // 1,625 and 2,370 with the demo studio's 20 % VAT.
    expect(letter[0]!.data).toMatchObject({ low: { minor: 195_000 }, high: { minor: 284_400 } });
    const narrower = { ...range, highMinor: 200_000 };
    expect(codeOf(await sendEstimate(services, owner, ref, narrower))).toBe('ok');
    expect((await letters(setting, ref)).filter((each) => each.startsWith('M6'))).toHaveLength(2);
  });

  it.each([
    [{ lowMinor: '400', highMinor: '300' }, 'highMinor'],
    [{ earliestWeeks: '9', latestWeeks: '8' }, 'latestWeeks'],
    [{ assumptions: ' \n ' }, 'assumptions'],
    [{ lowMinor: '-1' }, 'lowMinor'],
    [{ lowMinor: '10.005' }, 'lowMinor'],
  ])('refuses %o', (changes, field) => {
    const typed = {
      lowMinor: '1',
      highMinor: '2',
      drivers: 'x',
      assumptions: 'x',
      earliestWeeks: '1',
      latestWeeks: '2',
    };
    const parsed = sendEstimateSchema.safeParse({ ...typed, ...changes });
    expect(parsed.success ? [] : parsed.error.issues.map((issue) => issue.path[0])).toContain(field);
  });

  it('may be sent by an owner alone', async () => {
    const ref = await newEnquiry(setting);
    for (const actor of [setting.customer, setting.maker, setting.bookkeeper])
      expect(codeOf(await sendEstimate(setting.services, actor, ref, range))).not.toBe('ok');
  });
});

describe('rights', () => {
  it('are settled by the owner without touching what the customer sent', async () => {
    const { services, owner, customer } = setting;
    const ref = await newEnquiry(setting, { designSource: 'unknown' });
    const settled = { designSource: 'own' as const, rightsNote: 'The customer drew it; drawing dated and signed.' };
    expect(codeOf(await recordRights(services, customer, ref, settled))).not.toBe('ok');
    expect(codeOf(await recordRights(services, owner, ref, settled))).toBe('ok');
    const view = await readOwnerCommission(services, owner, ref);
    expect(view.ok && view.value.rights).toMatchObject(settled);
    expect(view.ok && view.value.rightsObstacle).toBeNull();
    expect((await commission(setting, ref)).enquiry).toMatchObject({ designSource: 'unknown' });
  });
});

describe('messages', () => {
  it('go both ways once each, and nobody else may write or reuse a number', async () => {
    const { services, customer, owner, other, maker, bookkeeper } = setting;
    const ref = await newEnquiry(setting);
    const note = { clientId: 'message-0001', body: 'Could the grip be oak?' };
    const first = await sendMessage(services, customer, ref, note);
    const sent = await Promise.all(Array.from({ length: 8 }, () => sendMessage(services, customer, ref, note)));
    for (const outcome of sent) expect(outcome).toEqual(first);
    expect(codeOf(await sendMessage(services, owner, ref, { clientId: 'message-0002', body: 'It can.' }))).toBe('ok');
    expect(codeOf(await sendMessage(services, owner, ref, note))).toBe('conflict');
    for (const actor of [other, maker, bookkeeper, null])
      expect(codeOf(await sendMessage(services, actor, ref, { clientId: 'message-0003', body: 'Mine?' }))).not.toBe(
        'ok',
      );
    const view = await readOwnerCommission(services, owner, ref);
    expect(view.ok && view.value.messages.map(({ from, body }) => [from, body])).toEqual([
      ['customer', 'Could the grip be oak?'],
      ['studio', 'It can.'],
    ]);
  });
});

// The specification, capability 41: a purchase order, net days, booked on the owner's decision of credit.
describe('an institution’s terms', () => {
  const terms = (typed: Record<string, string>) => buyerTermsSchema.parse({ poNumber: '', netDays: '', ...typed });
  const set = (ref: string, typed: Record<string, string>, actor = setting.owner) =>
    setBuyerTerms(setting.services, actor, ref, terms(typed));

  it('put off the first payment by its days, and stand from acceptance on; the order’s number may follow', async () => {
    const { services, customer } = setting;
    const ref = await newEnquiry(setting, { buyer: 'institution' });
    expect(codeOf(await set(ref, { netDays: '30' }))).toBe('ok');
    expect((await commission(setting, ref)).buyer).toEqual({ kind: 'institution', netDays: 30 });
    await sentQuote(setting, ref);
    const yes = acceptSchema.parse({ revision: '1', typedName: 'Lenn Valley', terms: 'yes', bespoke: 'yes', mark: 'yes', adult: 'yes' }); // prettier-ignore
    expect(codeOf(await acceptQuote(services, customer, ref, yes, '192.0.2.5'))).toBe('ok');
    const { id } = await commission(setting, ref);
    const { stages } = await readBalance(services.db, id, services.now());
    expect(stages[0]!.dueAt).toEqual(new Date(services.now().getTime() + 30 * 86_400_000));
    expect(await set(ref, { netDays: '60', poNumber: 'LV-7' })).toMatchObject({
      problem: { code: 'conflict', fields: { netDays: expect.stringContaining('30 days') } },
    });
    expect(codeOf(await set(ref, { netDays: '30', poNumber: 'LV-7' }))).toBe('ok');
    expect((await commission(setting, ref)).buyer).toMatchObject({ poNumber: 'LV-7', netDays: 30 });
  });

  it('are the owner’s to set, and no private buyer’s', async () => {
    const ref = await newEnquiry(setting, { buyer: 'institution' });
    for (const actor of [setting.customer, setting.maker, setting.bookkeeper])
      expect(codeOf(await set(ref, { netDays: '30' }, actor))).not.toBe('ok');
    expect(codeOf(await set(await newEnquiry(setting), { netDays: '30' }))).toBe('conflict');
    expect(buyerTermsSchema.safeParse({ netDays: '400' }).success).toBe(false);
  });
});
