import { writeFileSync } from 'node:fs';
import { tests } from './tests';

/**
 * What the extension host calls. The report goes to a file as well, after each test, since the exit code does not tell a
 * suite that passed from a host that died.
 */
export async function run(): Promise<void> {
  const results: { name: string; failure?: string; milliseconds: number }[] = [];
  const report = (complete: boolean): void => {
    const file = process.env['VISVIVA_EDITOR_REPORT'];
    if (file) writeFileSync(file, JSON.stringify({ complete, tests: results }, undefined, 2));
  };
  for (const [name, test] of Object.entries(tests)) {
    const start = performance.now();
    let failure: string | undefined;
    try {
      await test();
    } catch (error) {
      failure = error instanceof Error ? (error.stack ?? error.message) : String(error);
    }
    results.push({ name, failure, milliseconds: performance.now() - start });
    report(false);
  }
  report(true);
  const failed = results.filter((result) => result.failure);
  if (failed.length > 0) throw new Error(failed.map(({ name, failure }) => `${name}: ${failure}`).join('\n'));
}
