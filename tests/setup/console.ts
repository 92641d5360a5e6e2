import { afterEach, beforeEach, expect, vi } from 'vitest';

const watched = ['error', 'warn'] as const;

// Nothing may complain quietly: what the code, React or a library prints as an error fails the test,
// unless the test said with `expectConsole` that it belongs to the case.
beforeEach(() => {
  for (const method of watched) vi.spyOn(console, method);
});

afterEach(() => {
  const complaints = watched.flatMap((method) => {
    const spy = vi.mocked(console[method]);
    const calls = vi.isMockFunction(spy) ? spy.mock.calls : [];
    return calls.map((call) => `console.${method}: ${call.map(String).join(' ')}`);
  });
  vi.restoreAllMocks();
  expect(complaints, 'something was printed as an error or a warning').toEqual([]);
});
