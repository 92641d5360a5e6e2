import { render, screen } from '@testing-library/react';
import { expect, it } from 'vitest';
import { Button } from '../../src/components/ui/Button';
import { DateRange } from '../../src/components/ui/DateRange';
import { dateRangeWords, dayWords } from '../../src/components/ui/date-words';
import { Money } from '../../src/components/ui/Money';
import { Notice } from '../../src/components/ui/Notice';
import { corner } from '../../src/components/frame/corner';

it('says a range of days as short as it can be said without doubt', () => {
  expect(dateRangeWords('2027-03-09', '2027-03-20')).toBe('9 to 20 March');
  expect(dateRangeWords('2027-02-28', '2027-03-12')).toBe('28 February to 12 March');
  expect(dateRangeWords('2027-12-20', '2028-01-10')).toBe('20 December 2027 to 10 January 2028');
  expect(dateRangeWords('2027-03-09', '2027-03-20', true)).toBe('9 to 20 March 2027');
  expect(dateRangeWords('2027-03-09', '2027-03-09')).toBe('9 March');
});

it('says the same day in every time zone as the platform says in UTC', () => {
  const words = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'long', year: 'numeric', timeZone: 'UTC' });
  for (const day of ['2027-01-01', '2028-02-29', '2027-06-30', '2027-12-31']) {
    expect(dayWords(day, true)).toBe(words.format(new Date(`${day}T00:00:00Z`)));
  }
});

it('gives machines the days of a range', () => {
  const { container } = render(<DateRange from="2027-03-09" to="2027-03-20" />);
  expect(container.querySelector('time')?.getAttribute('datetime')).toBe('2027-03-09/2027-03-20');
});

it('writes money with its sign, and whole where asked', () => {
  const { container } = render(<Money minor={219000} currency="GBP" />);
  expect(container.textContent).toBe('£2,190.00');
  const whole = render(<Money minor={74200} currency="GBP" pence="whole" />);
  expect(whole.container.textContent).toBe('£742');
});

it('interrupts for a problem, waits for its turn with good news, and stays quiet otherwise', () => {
  render(
    <>
      <Notice kind="problem" title="The file is empty." />
      <Notice kind="done" title="Sent." />
      <Notice kind="info" title="Books are open." />
    </>,
  );
  expect(screen.getByRole('alert').textContent).toBe('The file is empty.');
  expect(screen.getByRole('status').textContent).toBe('Sent.');
  expect(screen.getByText('Books are open.').parentElement?.getAttribute('role')).toBeNull();
});

it('is a link when it leads somewhere and a button when it does something', () => {
  render(
    <>
      <Button href="/price" kind="main">
        Price a piece
      </Button>
      <Button name="act" value="send">
        Send revision 1
      </Button>
    </>,
  );
  expect(screen.getByRole('link', { name: 'Price a piece' }).getAttribute('href')).toBe('/price');
  expect(screen.getByRole('button', { name: 'Send revision 1' }).getAttribute('type')).toBe('submit');
});

it('leads each role to its own place', () => {
  const places = (['customer', 'maker', 'owner', 'bookkeeper'] as const).map(
    (role) => corner({ name: null, role }).href,
  );
  expect(places).toEqual(['/commissions', '/bench', '/studio', '/studio/money']);
  expect(corner(null).href).toBe('/sign-in');
});
