/** Results of suites outside the test runner, and the one file that the whole run is counted from. */
import { mkdirSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';

export class Results {
  passed = 0;
  failed = 0;

  /** Runs a check and counts it; its failure does not end the suite. */
  async check(name, run) {
    const start = performance.now();
    try {
      await run();
      this.pass(name, performance.now() - start);
    } catch (error) {
      this.fail(name, error instanceof Error ? (error.stack ?? error.message) : String(error));
    }
  }

  pass(name, milliseconds = 0) {
    this.passed++;
    console.log(`  ✓ ${name} (${Math.round(milliseconds)} ms)`);
  }

  fail(name, why) {
    this.failed++;
    console.log(`  ✗ ${name}\n      ${why.replaceAll('\n', '\n      ')}`);
  }

  /** Writes the counts where the caller wants them, and sets the exit status: a suite that ran nothing has failed. */
  finish(file = process.env['VISVIVA_RESULTS']) {
    console.log(`${this.passed} passed, ${this.failed} failed`);
    if (file) {
      mkdirSync(dirname(file), { recursive: true });
      writeFileSync(file, JSON.stringify({ numPassedTests: this.passed, numFailedTests: this.failed }));
    }
    process.exitCode = this.failed === 0 && this.passed > 0 ? 0 : 1;
  }
}
