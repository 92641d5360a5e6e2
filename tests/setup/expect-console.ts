import { expect, vi } from 'vitest';

/** Says that the case under test prints this and nothing else by `method`; call it after it happened. */
export function expectConsole(method: 'error' | 'warn', ...patterns: RegExp[]): void {
  const spy = vi.mocked(console[method]);
  const printed = spy.mock.calls.map((call) => call.map(String).join(' '));
  expect(printed).toHaveLength(patterns.length);
  patterns.forEach((pattern, index) => expect(printed[index]).toMatch(pattern));
  spy.mockClear();
}
