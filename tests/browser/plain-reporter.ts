import type { FullResult, Reporter, TestCase, TestResult } from '@playwright/test/reporter';

/** Ends every run with "browser: N passed, N failed, N skipped"; no executed test is a failure. */
export default class PlainReporter implements Reporter {
  private readonly last = new Map<string, TestResult['status']>();

  onTestEnd(test: TestCase, result: TestResult): void {
    this.last.set(test.id, result.status);
  }

  async onEnd(_result: FullResult): Promise<{ status?: FullResult['status'] }> {
    const statuses = [...this.last.values()];
    const passed = statuses.filter((s) => s === 'passed').length;
    const skipped = statuses.filter((s) => s === 'skipped').length;
    const failed = statuses.length - passed - skipped;
    process.stdout.write(`\nbrowser: ${passed} passed, ${failed} failed, ${skipped} skipped\n`);
    return passed + failed === 0 ? { status: 'failed' } : {};
  }

  printsToStdio(): boolean {
    return true;
  }
}
