/**
 * The suite in desktop VS Code: the current version, or the one named. Needs the network, for VS Code itself, and a display.
 * `npm run test:desktop [VERSION]`.
 */
import { runTests } from '@vscode/test-electron';
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { buildAll } from '../../scripts/build.mjs';
import { bundleSuite } from './bundle-suite.mjs';
import { Results } from './results.mjs';

const root = fileURLToPath(new URL('../..', import.meta.url));
const artifacts = join(root, '.artifacts', 'desktop');
const report = join(artifacts, 'report.json');

mkdirSync(artifacts, { recursive: true });
rmSync(report, { force: true });
await buildAll();
const suite = await bundleSuite(join(artifacts, 'suite'));
const results = new Results();
try {
  await runTests({
    version: process.argv[2] ?? 'stable',
    extensionDevelopmentPath: root,
    extensionTestsPath: suite,
    extensionTestsEnv: { VISVIVA_EDITOR_REPORT: report },
    launchArgs: [join(root, 'tests', 'editor', 'workspace'), '--disable-extensions', '--disable-workspace-trust'],
  });
} catch (error) {
  results.fail('desktop', String(error));
}
const counted = existsSync(report) ? JSON.parse(readFileSync(report, 'utf8')) : undefined;
if (!counted?.complete) results.fail('desktop', 'The suite did not reach its end.');
for (const { name, failure, milliseconds } of counted?.tests ?? []) {
  if (failure) results.fail(name, failure);
  else results.pass(name, milliseconds);
}
results.finish();
