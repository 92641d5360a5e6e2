import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { expect, it, vi } from 'vitest';
import { ArrivedFile, SendingFile } from '../../../src/components/quote/FileRows';
import { fileNumber } from '../../../src/components/quote/uploader';
import { readUpload, refusalOf, sizeWords } from '../../../src/components/quote/uploads';

const measure = { volumeMm3: 60_000.4, boxMm: [100.04, 30, 20], closed: true, problems: [] };
const body = {
  ok: true,
  id: '019b0000-0000-7000-8000-000000000007',
  name: 'bar.stl',
  kind: 'mesh',
  bytes: 684,
  thumb: null,
  measure: { ...measure, areaMm2: 1, shells: 1, triangles: 12 },
};

it('says the studio’s own sentence for a refused file, and its own for a broken connection or answer', () => {
  const refusal = JSON.stringify({ ok: false, problem: { code: 'unsupported', message: 'This file is empty.' } });
  expect(refusalOf(415, refusal)).toBe('This file is empty.');
  expect(refusalOf(0, '')).toMatch(/connection broke/);
  expect(refusalOf(502, '<html>')).toMatch(/could not be read/);
});

// The door takes numbers of 4 to 200 letters, digits, hyphens, underscores and slashes.
it('gives a file the same number each time, in a form the door takes', () => {
  const id = `uppy-${'long/name-'.repeat(30)}model/x.stl+binary-684-1796000000000`;
  expect(fileNumber('draft-00001', id)).toMatch(/^[0-9A-Za-z_/-]{4,200}$/);
  expect(fileNumber('draft-00001', id)).toBe(fileNumber('draft-00001', id));
  expect(fileNumber('draft-00001', id)).not.toBe(fileNumber('draft-00002', id));
  expect(fileNumber('draft-00001', id)).not.toBe(fileNumber('draft-00001', `${id.slice(0, -1)}1`));
});

it('offers a closed file’s measure in whole figures', async () => {
  const user = userEvent.setup();
  const onMeasure = vi.fn();
  const file = readUpload(body)!;
  const alloy = { name: 'Tin bronze, 90/10', densityGPerCm3: 8.75 };
  render(<ArrivedFile file={file} alloy={alloy} onMeasure={onMeasure} onRemove={() => undefined} />);
  expect(screen.getByText(/60\.0 cm³, 525 g in tin bronze/)).toBeTruthy();
  await user.click(screen.getByRole('button', { name: 'Price it by this measure' }));
  expect(onMeasure).toHaveBeenCalledWith({ volumeMm3: 60_000, longestMm: 100 });
});

it('offers no measure of an open file', () => {
  const open = { ...measure, volumeMm3: null, closed: false, problems: ['The surface is not closed.'] };
  const file = readUpload({ ...body, measure: open })!;
  render(<ArrivedFile file={file} onMeasure={() => undefined} onRemove={() => undefined} />);
  expect(screen.getByText('The surface is not closed.')).toBeTruthy();
  expect(screen.queryByRole('button', { name: /measure/ })).toBeNull();
});

it('shows how far a file has come, and can be cancelled, tried again and removed', async () => {
  const user = userEvent.setup();
  const [onRetry, onRemove] = [vi.fn(), vi.fn()];
  const row = { name: 'bar.stl', sent: 5_000_000, whole: 30_000_000, onRetry, onRemove };
  const { rerender } = render(<SendingFile {...row} error={null} />);
  expect(screen.getByRole('progressbar', { name: 'Sending bar.stl' })).toHaveProperty('value', 5_000_000);
  await user.click(screen.getByRole('button', { name: 'Cancel bar.stl' }));
  rerender(<SendingFile {...row} error="This file is empty." />);
  await user.click(screen.getByRole('button', { name: 'Try bar.stl again' }));
  await user.click(screen.getByRole('button', { name: 'Remove bar.stl' }));
  expect([onRetry.mock.calls.length, onRemove.mock.calls.length]).toEqual([1, 2]);
});

// 1 MB is 1,048,576 bytes here, as file managers count.
it('says sizes as people do', () => {
  expect([300, 524_288, 31_457_280].map(sizeWords)).toEqual(['1 kB', '512 kB', '30.0 MB']);
});
