import { EventEmitter } from 'node:events';
import type { IncomingMessage } from 'node:http';
import { afterEach, beforeEach, expect, it, vi } from 'vitest';
import { allowanceFor, watchSender } from '../../src/launch/front/body-limit';

/** A request as node:http hands it over while its body is still on the way. */
function arriving(length: number) {
  const socket = { destroy: vi.fn(), setTimeout: vi.fn() };
  const headers = { 'content-length': `${length}` };
  return Object.assign(new EventEmitter(), { complete: false, headers, socket }) as unknown as IncomingMessage;
}

beforeEach(() => void vi.useFakeTimers());
afterEach(() => void vi.useRealTimers());

it('cuts a sender that has not sent its form after a minute, and one that falls silent sooner', () => {
  const request = arriving(100);
  watchSender(request, allowanceFor('/api/form', 'application/json'));
  expect(request.socket.setTimeout).toHaveBeenCalledWith(30_000);
  vi.advanceTimersByTime(59_999);
  expect(request.socket.destroy).not.toHaveBeenCalled();
  vi.advanceTimersByTime(1);
  expect(request.socket.destroy).toHaveBeenCalledOnce();
});

it('gives a large file forty minutes', () => {
  const request = arriving(200_000_000);
  watchSender(request, allowanceFor('/api/uploads', 'multipart/form-data; boundary=b'));
  vi.advanceTimersByTime(40 * 60_000 - 1);
  expect(request.socket.destroy).not.toHaveBeenCalled();
  vi.advanceTimersByTime(1);
  expect(request.socket.destroy).toHaveBeenCalledOnce();
});

it('leaves alone whoever sent everything, however long the answer takes', () => {
  const request = arriving(100);
  watchSender(request, allowanceFor('/api/form', 'application/json'));
  request.emit('end');
  vi.advanceTimersByTime(3_600_000);
  expect(request.socket.destroy).not.toHaveBeenCalled();
  expect(request.socket.setTimeout).toHaveBeenLastCalledWith(0);
});
