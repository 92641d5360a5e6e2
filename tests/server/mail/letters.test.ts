import { describe, expect, test } from 'vitest';
import { SCRAP_CAUSES } from '../../../src/commission/making/making';
import { LETTER_DATA, type LetterData } from '../../../src/server/mail/letter-data';
import { LETTER_IDS, type LetterId } from '../../../src/server/mail/letter-ids';
import { renderLetter, type Frame } from '../../../src/server/mail/render';
import { photoIds, SAMPLES } from './sample-letters';

const frame: Frame = {
  publicUrl: 'http://localhost:4321',
  enclosed: [...photoIds],
  studio: {
    name: 'Marrowfen Casting House',
    place: 'Ostrey Quay, on the Lenn estuary',
    replyTo: 'studio@example.org',
    timeZone: 'Europe/London',
    quietHours: null,
    progressEveryDays: null,
  },
};

async function write<L extends LetterId>(id: L, changes: Partial<LetterData[L]> = {}) {
  const data: LetterData[L] = { ...SAMPLES[id], ...changes };
  return renderLetter(id, data, frame);
}

/** What each letter must say, from the "Says" column of the mail catalogue in the studio's description of its job, section 5. */
const SAYS: Record<LetterId, string[]> = {
  M0: ['402917', '10 minutes', 'if it was not you', 'http://localhost:4321/sign-in/confirm?ask=018f3b'],
  M1: ['MF-0181', 'sword-scan-final.stl', '3 December 2026', 'books are open'],
  M2: ['Isolde Wintermere', 'Missing', 'One real dimension', '#ask', '#estimate', '#decline'],
  M3: ['How long is the piece', 'Why we ask', 'saved as you go'],
  M5: ['no mark', 'What could change it', 'Thank you'],
  M6: ['£2,628.00 to £3,528.00', 'depends on', 'assumed', '26 January to 23 February 2027', 'not an offer'],
  M7: [
    '£2,698.80',
    '£449.80 VAT',
    '£1,492.80',
    'included',
    'round of changes',
    '720 g',
    'reed',
    '23 February 2027',
    '31 December 2026',
    '2026-1',
  ],
  M8: ['revision 2', 'revision 1', 'grip flange', 'no longer be accepted or paid', '£2,698.80'],
  M11: ['a3f19c0d5b7e', '£660.00', '8 December 2026', 'lapses', 'not received a payment'],
  M12: ['£660.00', 'Receipt 31', 'queue for the bench is 4', 'may cancel', 'about to be started'],
  M13: ['8 December 2026', 'held', 'bank account can take some working days'],
  M14: ['620 × 46 mm', 'TB88', 'blunt', '3 Sedge Lane', '6 December 2026'],
  M15: ['The wax beside the scale bar', 'approval fixes', 'can still change later', 'silence never counts as a yes'],
  M16: ['a3f19c0d5b7e', '£546.00', '14 December 2026'],
  M19: ['Broken out and brushed', 'sound', 'fettle'],
  M20: [
    'no charge',
    'froze before it reached the end',
    '9 February to 2 March 2027',
    'wait',
    'money back',
    'The unfilled tip',
  ],
  M23: ['731 g', '148 mm', '£1,492.80', '20 February 2027', '3 Sedge Lane', 'The finished sword'],
  M24: ['Estuary Parcels', 'EP 4471 902 6', 'adult', 'customs border', 'cardboard'],
  M26: ['wax', 'REED-7KQ2-MF', '12 March 2027', 'with a photo', 'reproduction'],
};

/** What a letter must not say, from the "Must not" column and the general must-nots of the same table. */
const MUST_NOT: Partial<Record<LetterId, RegExp>> = {
  M0: /account|password|registered/i,
  M1: /£|\d+ weeks/,
  M6: /deposit|pay /i,
  M7: /bench hour|chance of|margin|probab/i,
  M8: /bench hour|chance of|margin|probab/i,
  M11: /thank you for (your|the) payment|payment received/i,
  M15: /\/approve|by default|automatically/i,
  M20: /your fault|unfortunately for you/i,
  M23: /shipped/i,
  M24: /sword in the parcel|bronze weapon/i,
  M26: /review|rate us|recommend us/i,
};

describe.each(LETTER_IDS)('%s', (id) => {
  test('says in both parts what it is for', async () => {
    const { html, text, subject } = await write(id);
    // Facts at line ends wrap in text; compare without line breaks and column gaps.
    const flatText = text.replace(/\s+/g, ' ').toLowerCase();
    const readable = decode(html.replace(/<!--.*?-->|<(?!a\b)[^>]+>/gs, '')).toLowerCase();
    for (const fact of SAYS[id]) {
      expect(readable, `${id} html`).toContain(fact.toLowerCase());
      expect(flatText, `${id} text`).toContain(fact.startsWith('#') ? fact : fact.toLowerCase());
    }
    expect(subject).not.toMatch(/[!A-Z]{4,}|!/);
    if (id !== 'M0') expect(`${subject} ${text}`).toContain('MF-0181');
  });

  test('keeps out what it must not say', async () => {
    const { html, text, subject } = await write(id);
    const forbidden = MUST_NOT[id];
    if (forbidden) {
      expect(text).not.toMatch(forbidden);
      expect(subject).not.toMatch(forbidden);
    }
    expect(html).not.toMatch(/checkout\.stripe|cs_test_|pay\.stripe/);
    expect(`${text} ${subject}`).not.toMatch(/\b(authentic|ancient|original)\b/i);
  });

  test('loads nothing from afar and links only to our own pages', async () => {
    const { html, text } = await write(id);
    const loads = [...html.matchAll(/<(?:img|link|script|iframe)[^>]*(?:src|href)="([^"]*)"/g)].map(
      (match) => match[1]!,
    );
    expect(loads.filter((address) => !address.startsWith('cid:'))).toEqual([]);
    expect(html).not.toMatch(/url\(|@import|width="1"|height="1"/);
    const links = [...html.matchAll(/<a[^>]*href="([^"]*)"/g)].map((match) => new URL(decode(match[1]!)).origin);
    expect(new Set(links)).toEqual(new Set([frame.publicUrl]));
    for (const [address] of text.matchAll(/https?:\/\/\S+/g)) expect(new URL(address).origin).toBe(frame.publicUrl);
  });

  test('says whose turn it is and is the same each time it is written', async () => {
    const first = await write(id);
    const second = await write(id);
    expect(second).toEqual(first);
    expect(first.text).toMatch(/Your turn\.|Our turn\.|Nothing to do\./);
  });

  test('refuses data it has no place for', () => {
    const leaky = { ...SAMPLES[id], chanceOfLoss: 0.0506 };
    expect(LETTER_DATA[id].safeParse(leaky).success).toBe(false);
    expect(LETTER_DATA[id].safeParse(SAMPLES[id]).success).toBe(true);
  });
});

describe('letters in other cases', () => {
  test('a sign-in letter reads the same for every address, and names the enquiry only when it confirms one', async () => {
    const plain = await write('M0');
    expect(plain.text).not.toContain('enquiry');
    const confirming = await write('M0', { enquiry: { ref: 'MF-0190', title: 'Palstave' } });
    expect(confirming.subject).toContain('MF-0190');
  });

  test.each(Object.keys(SCRAP_CAUSES) as LetterData['M20']['cause'][])(
    'a failed pour tells %s in plain words',
    async (cause) => {
      const { text } = await write('M20', { cause, outerMoved: false });
      expect(text.replace(/\s+/g, ' ')).toContain(SCRAP_CAUSES[cause].plain);
      expect(text).not.toContain('money back');
    },
  );

  test('a photo that does not travel with the mail is told by its caption', async () => {
    const { html, text } = await renderLetter('M19', SAMPLES.M19, { ...frame, enclosed: [] });
    expect(html).not.toContain('<img');
    expect(text).toContain('On your page: Broken out and brushed');
  });

  test('the studio’s copy of an acceptance asks the studio for nothing and leads to its own page', async () => {
    const { text } = await write('M11', { reader: 'owner', name: 'Wren Addlecombe' });
    expect(text).toContain('http://localhost:4321/studio/commissions/MF-0181');
    expect(text).not.toContain('Your turn.');
  });

  test('words of people are text, not markup', async () => {
    const { html } = await write('M5', { reason: '<img src=x onerror=alert(1)> & "so"' });
    expect(html).not.toContain('<img');
    expect(html).toContain('&lt;img src=x');
  });
});

function decode(text: string): string {
  return text.replaceAll('&amp;', '&').replaceAll('&#x27;', "'").replaceAll('&quot;', '"');
}

test('M11 to a buyer on credit says by when to pay, and threatens no lapse that will not come', async () => {
  const { text } = await write('M11', { onCredit: true });
  expect(text).toMatch(/purchase order/);
  expect(text).not.toMatch(/lapses/);
});
