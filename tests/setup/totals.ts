import type { Reporter, TestCase, TestModule } from 'vitest/node';

/**
 * Counts the tests of each project and ends the output with one plain line for all of them together.
 * A file that cannot be loaded counts as one failed test, so that it can never pass unseen.
 */
export default class Totals implements Reporter {
  onTestRunEnd(modules: ReadonlyArray<TestModule>, unhandled: ReadonlyArray<unknown>): void {
    const counts = new Map<string, { passed: number; failed: number }>();
    for (const module of modules) {
      const count = counts.get(module.project.name) ?? { passed: 0, failed: 0 };
      counts.set(module.project.name, count);
      const tests = [...module.children.allTests()];
      count.passed += tests.filter(hasState('passed')).length;
      count.failed += tests.filter(hasState('failed')).length;
      if (module.errors().length > 0) count.failed += 1;
    }
    const lines = [...counts].map(([name, { passed, failed }]) => `  ${name}: ${passed} passed, ${failed} failed`);
    const all = [...counts.values()];
    const passed = all.reduce((sum, count) => sum + count.passed, 0);
    const failed = all.reduce((sum, count) => sum + count.failed, unhandled.length);
    process.stdout.write(`\n${lines.join('\n')}\n${passed} passed, ${failed} failed\n`);
  }
}

function hasState(state: 'passed' | 'failed'): (test: TestCase) => boolean {
  return (test) => test.result().state === state;
}
