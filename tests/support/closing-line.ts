import type { Reporter, SerializedError, TestModule } from 'vitest/node';

/** Closes the run with one line of plain figures. A file that can't be loaded and an error outside a test count as failures. */
export default class ClosingLine implements Reporter {
  onTestRunEnd(modules: readonly TestModule[], errors: readonly SerializedError[]): void {
    let passed = 0;
    let failed = errors.length;
    for (const module of modules) {
      const results = [...module.children.allTests()].map((test) => test.result().state);
      passed += results.filter((state) => state === 'passed').length;
      const failures = results.filter((state) => state === 'failed').length;
      failed += failures === 0 && module.state() === 'failed' ? 1 : failures;
    }
    process.stdout.write(`\n${passed} passed, ${failed} failed\n`);
  }
}
