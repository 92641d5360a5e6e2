import { render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { HttpResponse, http } from 'msw';
import { setupServer } from 'msw/node';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { deskChoices } from '../../src/commission/pricing/desk-choices';
import { deskFields } from '../../src/commission/pricing/desk-fields';
import { metalLines } from '../../src/commission/pricing/metal-lines';
import { formatMoney } from '../../src/commission/money';
import { priceQuote } from '../../src/commission/pricing/quote';
import type { QuoteDraft } from '../../src/commission/pricing/quote-draft';
import { QuoteDesk } from '../../src/components/studio/QuoteDesk';
import { swordFromFile } from '../../src/demo/drafts';
import { demoRates } from '../../src/demo/rates';

const server = setupServer();
beforeAll(() => server.listen({ onUnhandledRequest: 'error' }));
afterEach(() => server.resetHandlers());
afterAll(() => server.close());

const DOOR = '*/api/commissions/MF-0181/quote-draft';

function openDesk(draft: QuoteDraft = { ...swordFromFile(), termsVersion: '2026-1' }) {
  render(
    <QuoteDesk
      reference="MF-0181"
      customer="Isolde Wintermere"
      revision={1}
      draft={draft}
      choices={deskChoices(demoRates)}
      fields={deskFields(draft, 0)}
      problem={null}
      differences={[]}
      review={false}
      ratesChanged={false}
    />,
  );
  return { draft, person: userEvent.setup() };
}

const price = () => screen.getByText('Work price').nextElementSibling?.textContent;
const hoursOf = (label: string) => screen.getByRole('textbox', { name: `Hours, ${label}` });

describe('the quote desk', () => {
  it('shows the worked example: price, expected cost, first pour, chance of a loss, stages', () => {
    openDesk();
    expect(price()).toBe('£2,190');
    // Worked example 1 of the studio's pricing model.
    for (const [label, value] of [
      ['Expected', '£1,751.53'],
      ['4 in 5 below', '£1,884.91'],
      ['Sound at first pour', '17 in 24'],
      ['Chance of a loss', '5.1 %'],
      ['Deposit', '£550'],
      ['At gate A', '£455'],
    ])
      expect(screen.getByText(label!).nextElementSibling?.textContent).toBe(value);
  });

  it('prices again at each key exactly as the server will', async () => {
    const { draft, person } = openDesk();
    const fettling = draft.lines.find((line) => line.lostWhenLate)!;
    const input = hoursOf(fettling.label);
    await person.clear(input);
    await person.type(input, '9.5');
    const changed = draft.lines.map((line) => (line === fettling ? { ...line, minutes: 570 } : line));
    const expected = priceQuote({ ...draft, lines: changed });
    expect(price()).toBe(formatMoney(expected.workMinor, 'GBP', { pence: 'whole' }));
    expect(expected.workMinor).not.toBe(priceQuote(draft).workMinor);
  });

  it('keeps the last price and says what is wrong while a figure cannot be read', async () => {
    const { draft, person } = openDesk();
    const input = hoursOf(draft.lines[0]!.label);
    await person.type(input, ' or so');
    expect(price()).toBe('£2,190');
    expect(input.getAttribute('aria-invalid')).toBe('true');
    expect(within(input.closest('tr')!).getByText(/Give hours as a number/)).toBeTruthy();
  });

  it('leaves a line out of the price when it is ticked', async () => {
    const { draft, person } = openDesk();
    const dear = draft.lines.find((line) => line.lostWhenLate)!;
    const row = hoursOf(dear.label).closest('tr')!;
    await person.click(within(row).getByLabelText('Leave this line out'));
    const rest = priceQuote({ ...draft, lines: draft.lines.filter((line) => line !== dear) });
    expect(price()).toBe(formatMoney(rest.workMinor, 'GBP', { pence: 'whole' }));
    expect(within(row).getByText('–')).toBeTruthy();
  });

  it('takes another line as it is named, and offers the next one', async () => {
    const { person } = openDesk();
    const rows = () => screen.getAllByText('Another line').length;
    expect(rows()).toBe(1);
    const row = hoursOf('another line').closest('tr')!;
    await person.type(within(row).getByLabelText('Name'), 'Gilding');
    await person.type(within(row).getByRole('textbox', { name: /^Materials/ }), '100');
    expect(rows()).toBe(2);
    expect(price()).not.toBe('£2,190');
  });

  it('lets the metal follow the masses, key by key, until its amount is typed over', async () => {
    const { draft, person } = openDesk();
    const amountOf = (label: string) => screen.getByRole('textbox', { name: `Materials, ${label}` });
    const retype = async (input: HTMLElement, text: string) => {
      await person.clear(input);
      await person.type(input, text);
    };
    await retype(screen.getByRole('textbox', { name: 'As cast, each' }), '900');
    await retype(screen.getByRole('textbox', { name: 'Poured, each' }), '1680');
    // The specification, 4.1, 4.2: 146.00 x 1,680 / 8,400; 43 g at 14.60; 780 g at 4.80; 900 g at 14.60 per kg.
    const amounts = { 'Share of a heat': '29.20', 'Metal lost in the melt': '0.63', 'Gating back to the returns': '3.74', 'Metal in the piece': '13.14' }; // prettier-ignore
    for (const [label, amount] of Object.entries(amounts)) expect(amountOf(label)).toHaveProperty('value', amount);
    const massesG = { finished: 720, cast: 900, poured: 1680 };
    const metal = metalLines(massesG, draft.metal, 14_600, 8400);
    const lines = draft.lines.map((line) => metal.find((each) => each.id === line.id) ?? line);
    const expected = priceQuote({ ...draft, massesG, lines });
    expect(screen.getByText('Expected').nextElementSibling?.textContent).toBe(
      formatMoney(Math.round(expected.cost.expected), 'GBP'),
    );
    await retype(amountOf('Metal in the piece'), '20.00');
    await retype(screen.getByRole('textbox', { name: 'As cast, each' }), '880');
    expect(amountOf('Metal in the piece')).toHaveProperty('value', '20.00');
    expect(amountOf('Gating back to the returns')).toHaveProperty('value', '3.84');
  });

  it('takes rush, another alloy, another currency and export', async () => {
    const { draft, person } = openDesk();
    await person.click(screen.getByRole('checkbox', { name: 'Rush' }));
    // Worked example 1, rush: 2,318.52 expected, a price of 2,900.
    expect(screen.getByText('Expected').nextElementSibling?.textContent).toBe('£2,318.52');
    expect(price()).toBe('£2,900');
    await person.click(screen.getByRole('checkbox', { name: 'Rush' }));
    await person.selectOptions(screen.getByRole('combobox', { name: 'Quoted in' }), 'EUR');
    // 2,190 x 1.1700 x 1.02, up to five.
    expect(price()).toBe('€2,615');
    await person.selectOptions(screen.getByRole('combobox', { name: 'Tax' }), 'export');
    expect(screen.getByText('Total, export')).toBeTruthy();
    await person.selectOptions(screen.getByRole('combobox', { name: 'Alloy' }), 'TB90');
    expect(screen.getByRole('textbox', { name: 'Materials, Metal in the piece' })).toHaveProperty('value', '12.14');
    expect(draft.metal.code).toBe('TB88');
  });

  it('saves, then asks once more and names what will be frozen', async () => {
    const sent: unknown[] = [];
    server.use(
      http.post(DOOR, async ({ request }) => {
        sent.push(await request.json());
        return HttpResponse.json({ ok: true, value: { version: 1, revision: 1 } });
      }),
    );
    const { person } = openDesk();
    await person.click(screen.getByRole('button', { name: 'Send revision 1' }));
    const panel = await screen.findByRole('region', { name: 'Send revision 1' });
    expect(panel.textContent).toContain('£2,698.80');
    expect(sent).toMatchObject([{ version: '0', title: swordFromFile().title }]);
    const form = within(panel).getByRole('button', { name: 'Send revision 1 now' }).closest('form')!;
    const fields = Object.fromEntries(new FormData(form));
    expect(form.getAttribute('action')).toBe('/api/commissions/MF-0181/quotes');
    expect(fields).toMatchObject({ version: '1', revision: '1' });
  });

  it('keeps what was typed when another window saved first, and saves over it at the second press', async () => {
    const elsewhere = { ...swordFromFile(), termsVersion: '2026-1', includedRounds: 3 };
    const versions: unknown[] = [];
    server.use(
      http.get(DOOR, () => HttpResponse.json({ ok: true, value: { version: 4, revision: 1, draft: elsewhere } })),
      http.post(DOOR, async ({ request }) => {
        const { version } = (await request.json()) as { version: string };
        versions.push(version);
        if (version === '4') return HttpResponse.json({ ok: true, value: { version: 5, revision: 1 } });
        const problem = { code: 'stale', message: 'The draft was saved from another window.' };
        return HttpResponse.json({ ok: false, problem }, { status: 409 });
      }),
    );
    const { draft, person } = openDesk();
    const input = hoursOf(draft.lines[0]!.label);
    await person.clear(input);
    await person.type(input, '3');
    await person.click(screen.getByRole('button', { name: 'Save the draft' }));
    expect((await screen.findByRole('alert')).textContent).toContain('another window');
    expect(input).toHaveProperty('value', '3');
    expect(screen.getByText('Rounds of change included: saved 3, typed 1')).toBeTruthy();
    expect(screen.getByText(new RegExp(`^${draft.lines[0]!.label}: saved 90 min`))).toBeTruthy();
    await person.click(screen.getByRole('button', { name: 'Save the draft' }));
    await waitFor(() => expect(screen.getByRole('status').textContent).toBe('The draft is saved.'));
    expect(versions).toEqual(['0', '4']);
  });

  it('says so when the server cannot be reached, and keeps what was typed', async () => {
    server.use(http.post(DOOR, () => HttpResponse.error()));
    const { person } = openDesk();
    await person.click(screen.getByRole('button', { name: 'Save the draft' }));
    expect((await screen.findByRole('alert')).textContent).toContain('could not be reached');
  });
});
