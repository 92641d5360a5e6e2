import { render, screen, within } from '@testing-library/react';
import { expect, it } from 'vitest';
import { Runner, type RunnerStage } from '../../src/components/ui/Runner';

const stages: RunnerStage[] = [
  { name: 'Pattern', note: 'You approved it 12 January', state: 'done' },
  { name: 'Patina', state: 'skipped' },
  { name: 'Finishing', note: '5 h of about 9 h 30', state: 'hot', share: 0.5 },
  { name: 'Dispatch', state: 'ahead' },
];

it('is an ordered list whose entries say their state, the current one marked as the step', () => {
  render(<Runner stages={stages} />);
  const entries = within(screen.getByRole('list', { name: 'Stages of the piece' })).getAllByRole('listitem');
  expect(entries.map((entry) => entry.textContent)).toEqual([
    'Pattern, doneYou approved it 12 January',
    'Patina, left out',
    'Finishing, now5 h of about 9 h 30',
    'Dispatch, to come',
  ]);
  expect(entries.map((entry) => entry.getAttribute('aria-current'))).toEqual([null, null, 'step', null]);
});

it('fills the runner up to the hot stage and no further', () => {
  const { container } = render(<Runner stages={stages} layout="row" />);
  const filled = [...container.querySelectorAll('svg')].map((svg) =>
    svg.querySelector('rect[fill^="url"]')?.getAttribute('width'),
  );
  expect(filled).toEqual(['100%', '100%', '50%', undefined]);
});

it('draws no gate for a stage that is left out', () => {
  const { container } = render(<Runner stages={stages} layout="row" />);
  const gates = [...container.querySelectorAll('svg')].map((svg) => svg.querySelectorAll('polygon').length);
  expect(gates).toEqual([2, 0, 2, 1]);
});

it('speaks no state when it only explains', () => {
  render(<Runner stages={stages} explains label="How a commission runs" />);
  const list = screen.getByRole('list', { name: 'How a commission runs' });
  expect(list.textContent).not.toMatch(/, (done|now|to come|left out)/);
  expect(list.querySelector('[aria-current]')).toBeNull();
});
