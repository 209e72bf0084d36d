import { writeFileSync } from 'node:fs';
import type { Reporter, SerializedError, TestModule } from 'vitest/node';

/**
 * Ends the run with one line that people and scripts can read: `N passed, N failed`, and `, N skipped` if any. A test
 * file that cannot be loaded, and an error outside of every test, count as a failure.
 */
export default class SummaryReporter implements Reporter {
  onTestRunEnd(testModules: readonly TestModule[], unhandledErrors: readonly SerializedError[]): void {
    let passed = 0;
    let failed = unhandledErrors.length;
    let skipped = 0;
    for (const testModule of testModules) {
      failed += testModule.errors().length;
      for (const suite of testModule.children.allSuites()) failed += suite.errors().length;
      for (const test of testModule.children.allTests()) {
        const { state } = test.result();
        if (state === 'passed') passed++;
        else if (state === 'failed') failed++;
        else skipped++;
      }
    }
    const line = `${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ''}`;
    // After the default reporter, which may still be writing its own summary.
    process.once('exit', () => process.stdout.write(`${line}\n`));
    const summaryFile = process.env.TEST_SUMMARY_FILE;
    if (summaryFile !== undefined) writeFileSync(summaryFile, JSON.stringify({ passed, failed, skipped }));
  }
}
