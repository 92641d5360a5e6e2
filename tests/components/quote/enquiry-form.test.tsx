import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { afterEach, beforeEach, expect, it, vi } from 'vitest';
import { EnquiryForm } from '../../../src/components/quote/EnquiryForm';
import type { EnquiryStart } from '../../../src/components/quote/enquiry-start';

const start: EnquiryStart = {
  estimate: { form: 'spearhead', lengthMm: '180', currency: 'GBP' },
  words: { clientId: 'draft-00001', designSource: 'studio-form' },
  uploads: [],
  problem: null,
  bladed: true,
  ownAddress: null,
  alloy: null,
};
const field = (name: RegExp) => screen.getByRole<HTMLInputElement>('textbox', { name });
const send = () => screen.getByRole('button', { name: 'Send the enquiry' });

let sent: unknown[];
let answer: () => Response;

beforeEach(() => {
  localStorage.clear();
  sent = [];
  vi.stubGlobal('fetch', async (_path: string, init?: RequestInit) => {
    sent.push(JSON.parse(String(init?.body)));
    return answer();
  });
});
afterEach(() => vi.unstubAllGlobals());

async function fill(user: ReturnType<typeof userEvent.setup>) {
  await user.type(field(/^What have you in mind/), 'A spear for the wall of a school.');
  await user.selectOptions(screen.getByRole('combobox', { name: 'What is it for?' }), 'teaching');
  await user.type(field(/^Name/), 'Orla Penhallow');
  await user.type(field(/^Mail address/), 'orla@example.org');
  await user.click(screen.getByRole('checkbox', { name: /18 or over/ }));
  await user.click(screen.getByRole('checkbox', { name: /You may keep/ }));
}

it('names everything that is missing beside its field, and sends nothing', async () => {
  const user = userEvent.setup();
  render(<EnquiryForm start={start} />);
  await user.type(field(/^Mail address/), 'orla at home');
  await user.click(send());
  const reasons = [...document.querySelectorAll('.error')].map(({ textContent }) => textContent);
  expect(reasons).toHaveLength(6);
  expect(screen.getByRole('checkbox', { name: /18 or over/, description: /This piece is a blade/ })).toBeTruthy();
  expect(field(/^Mail address/).value).toBe('orla at home');
  expect(document.activeElement).toBe(field(/^What have you in mind/));
  expect(sent).toEqual([]);
});

it('sends the estimate along with the words, forgets the draft and goes where the studio leads', async () => {
  const user = userEvent.setup();
  const goTo = vi.spyOn(window.location, 'assign').mockImplementation(() => undefined);
  answer = () => Response.json({ ok: true, value: {}, to: '/price/sent?ref=MF-0300' });
  render(<EnquiryForm start={start} />);
  await screen.findByRole('button', { name: 'Choose files' }, { timeout: 10_000 });
  await fill(user);
  await user.click(send());
  await vi.waitFor(() => expect(goTo).toHaveBeenCalledWith('/price/sent?ref=MF-0300'));
  expect(sent).toEqual([
    expect.objectContaining({
      clientId: 'draft-00001',
      form: 'spearhead',
      lengthMm: '180',
      wish: 'A spear for the wall of a school.',
      use: 'teaching',
      uploads: [],
    }),
  ]);
  expect(localStorage.getItem('enquiry-draft')).toBeNull();
});

it('shows the studio’s own reason beside the field and keeps every word', async () => {
  const user = userEvent.setup();
  const message = 'We do not make pieces without our mark.';
  answer = () =>
    Response.json({ ok: false, problem: { code: 'invalid', message, fields: { wish: message } } }, { status: 422 });
  render(<EnquiryForm start={start} />);
  await fill(user);
  await user.click(send());
  expect((await screen.findByRole('alert')).textContent).toContain(message);
  expect(
    screen.getByRole('textbox', { name: /^What have you in mind/, description: new RegExp(message) }),
  ).toHaveProperty('value', 'A spear for the wall of a school.');
});

it('says that the studio was not reached, and can be sent again under the same number', async () => {
  const user = userEvent.setup();
  answer = () => {
    throw new TypeError('no network');
  };
  render(<EnquiryForm start={start} />);
  await fill(user);
  await user.click(send());
  expect((await screen.findByRole('alert')).textContent).toContain('Everything you typed is still here');
  await user.click(send());
  await vi.waitFor(() => expect(sent).toHaveLength(2));
  expect(sent[0]).toEqual(sent[1]);
});

it('brings back what was typed earlier, but not over what the page brought', async () => {
  localStorage.setItem(
    'enquiry-draft',
    JSON.stringify({ clientId: 'draft-00000', words: { wish: 'Typed yesterday.' } }),
  );
  const { unmount } = render(<EnquiryForm start={start} />);
  expect(field(/^What have you in mind/).value).toBe('Typed yesterday.');
  answer = () => Response.json({ ok: false, problem: { code: 'unavailable', message: 'Later.' } }, { status: 503 });
  await fill(userEvent.setup());
  await userEvent.click(send());
  await vi.waitFor(() => expect(sent).toEqual([expect.objectContaining({ clientId: 'draft-00000' })]));
  unmount();
  const problem = { code: 'invalid' as const, message: 'Look again.' };
  render(<EnquiryForm start={{ ...start, problem, words: { ...start.words, wish: 'Typed just now.' } }} />);
  expect(field(/^What have you in mind/).value).toBe('Typed just now.');
});
