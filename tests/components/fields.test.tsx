import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { expect, it } from 'vitest';
import { Checkbox } from '../../src/components/ui/Checkbox';
import { Field } from '../../src/components/ui/Field';
import { FormProblem } from '../../src/components/ui/FormProblem';
import { RadioRows } from '../../src/components/ui/RadioRows';
import { Select } from '../../src/components/ui/Select';

// Names and descriptions are asked for as WAI-ARIA's accessible name and description computation gives them
// (accname 1.2, through dom-testing-library), which is what WCAG 2.2, 1.3.1, 3.3.1 and 3.3.2 are judged by.

it('names a field by its label and describes it by hint and error', () => {
  render(
    <Field label="Length" name="length" unit="mm" hint="From tip to butt." error="Give 10 to 900 mm." value="5" />,
  );
  const input = screen.getByRole('textbox', { name: 'Length', description: 'From tip to butt. Give 10 to 900 mm.' });
  expect(input).toHaveProperty('value', '5');
  expect(input.getAttribute('aria-invalid')).toBe('true');
  expect(input.id).toBe('length');
});

it('does not call a good field invalid, and says when it may stay empty', () => {
  render(<Field label="Telephone" name="telephone" optional rows={3} />);
  const input = screen.getByRole('textbox', { name: 'Telephone (optional)' });
  expect(input.tagName).toBe('TEXTAREA');
  expect(input.hasAttribute('aria-invalid')).toBe(false);
  expect(input.hasAttribute('aria-describedby')).toBe(false);
});

it('keeps what was chosen in a list, and starts empty when nothing was', () => {
  const options = [
    { value: 'GB', label: 'United Kingdom' },
    { value: 'DE', label: 'Germany' },
  ];
  const { unmount } = render(<Select label="Destination" name="to" options={options} value="DE" error="Not there." />);
  expect(screen.getByRole('combobox', { name: 'Destination', description: 'Not there.' })).toHaveProperty(
    'value',
    'DE',
  );
  unmount();
  render(<Select label="Destination" name="to" options={options} placeholder="Choose a country" />);
  expect(screen.getByRole('combobox')).toHaveProperty('value', '');
});

it('ties the words and the reason to a box', () => {
  render(
    <Checkbox name="adult" hint="Blades go to adults." error="Tick this to go on.">
      I am 18 or over
    </Checkbox>,
  );
  const box = screen.getByRole('checkbox', {
    name: 'I am 18 or over',
    description: 'Blades go to adults. Tick this to go on.',
  });
  expect(box).toHaveProperty('value', 'yes');
});

it('lets a row be chosen by keyboard, and only one of them', async () => {
  const user = userEvent.setup();
  const rows = [
    { value: 'TB90', name: 'Tin bronze, 90/10', note: 'Warm gold-brown.', colour: 'oklch(0.7 0.1 70)' },
    { value: 'RB85', name: 'Red brass', amount: '−40' },
  ];
  render(<RadioRows legend="Alloy" name="alloy" rows={rows} value="TB90" />);
  expect(screen.getByRole('group', { name: 'Alloy' })).toBeTruthy();
  const [bronze, brass] = screen.getAllByRole('radio') as HTMLInputElement[];
  expect(bronze?.checked).toBe(true);
  expect(screen.getByRole('radio', { name: /Tin bronze, 90\/10 Warm gold-brown\./ })).toBe(bronze);
  await user.tab();
  expect(document.activeElement).toBe(bronze);
  await user.click(brass!);
  expect([bronze?.checked, brass?.checked]).toEqual([false, true]);
});

it('announces a refusal and links each of its fields', () => {
  render(
    <FormProblem
      problem={{ message: 'Two things are missing.', fields: { length: 'Give a length.', alloy: 'Choose an alloy.' } }}
      ids={{ alloy: 'alloy-row' }}
    />,
  );
  const alert = screen.getByRole('alert');
  expect(alert.textContent).toContain('Two things are missing.');
  const targets = screen.getAllByRole('link').map((link) => link.getAttribute('href'));
  expect(targets).toEqual(['#length', '#alloy-row']);
});

it('draws nothing where nothing was refused', () => {
  const { container } = render(<FormProblem problem={null} />);
  expect(container.childElementCount).toBe(0);
});
