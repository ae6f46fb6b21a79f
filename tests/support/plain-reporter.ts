import type { Reporter, TestModule } from 'vitest/node';

/** Ends every run with one plain line, "unit: N passed, N failed", and fails a run that executed nothing. */
export default class PlainReporter implements Reporter {
  onTestRunEnd(modules: readonly TestModule[]): void {
    let passed = 0;
    let failed = 0;
    let skipped = 0;
    for (const module of modules) {
      if (!module.ok() && [...module.children.allTests()].every((test) => test.result().state !== 'failed'))
        failed++;
      for (const test of module.children.allTests()) {
        const state = test.result().state;
        if (state === 'passed') passed++;
        else if (state === 'failed') failed++;
        else skipped++;
      }
    }
    process.stdout.write(`\nvitest: ${passed} passed, ${failed} failed, ${skipped} skipped\n`);
    if (passed + failed === 0) process.exitCode = 1;
  }
}
