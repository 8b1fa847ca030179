import type { Reporter, TestModule } from 'vitest/node';
import { hasShared } from './shared';

/** Ends the run with the plain line "N passed, N failed, N skipped"; a skip fails where the shared folder is there. */
export default class ClosingLine implements Reporter {
  private summary = '';

  onTestRunEnd(modules: readonly TestModule[], errors: readonly unknown[]): void {
    const counts = { passed: 0, failed: errors.length, skipped: 0 };
    for (const module of modules) {
      if (module.errors().length > 0) counts.failed += 1;
      for (const test of module.children.allTests()) {
        const { state } = test.result();
        if (state === 'passed') counts.passed += 1;
        else if (state === 'failed') counts.failed += 1;
        else counts.skipped += 1;
      }
    }
    if (hasShared && counts.skipped > 0) process.exitCode = 1;
    this.summary = `${counts.passed} passed, ${counts.failed} failed, ${counts.skipped} skipped`;
    process.on('exit', () => process.stdout.write(`${this.summary}\n`));
  }
}
