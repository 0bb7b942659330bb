import { appendFileSync } from 'node:fs';
import type { Reporter, TestModule } from 'vitest/node';

/** Appends "passed failed skipped" to the file named by TEST_COUNTS, so that `npm test` can print one closing line. */
export default class CountReporter implements Reporter {
  onTestRunEnd(modules: readonly TestModule[]): void {
    const file = process.env.TEST_COUNTS;
    if (!file) return;
    const count = { passed: 0, failed: 0, skipped: 0 };
    for (const module of modules) {
      const tests = [...module.children.allTests()];
      for (const test of tests) {
        const { state } = test.result();
        count[state === 'pending' ? 'failed' : state] += 1;
      }
      if (module.state() === 'failed' && !tests.some((test) => test.result().state === 'failed')) count.failed += 1;
    }
    appendFileSync(file, `${count.passed} ${count.failed} ${count.skipped}\n`);
  }
}
